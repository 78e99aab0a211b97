import { fileURLToPath } from 'node:url';
import { join } from 'node:path';
import { openDepartment, openGround, openRequests } from '../../src/cli/ground.js';
import {
  PlanBook,
  usualScenario,
  workOut,
  type Scenario,
  type WorkedOut,
} from '../../src/throughput/index.js';

const root = fileURLToPath(new URL('../../', import.meta.url));

export const { ground } = openGround();
export const department = openDepartment();
export const requests = openRequests(join(root, 'data-demo', 'requests.csv')).requests.map(
  (r) => r.request,
);
export const book = new PlanBook(ground);

/** The demo department with more requests than it can serve. */
export const usual: Scenario = {
  ...usualScenario(department, requests).scenario,
  requestsPerDay: 60,
  listAtStart: 300,
};

export function worked(scenario: Scenario): WorkedOut {
  const run = workOut(scenario, requests, ground, book);
  let step = run.next();
  while (step.done !== true) step = run.next();
  return step.value;
}
