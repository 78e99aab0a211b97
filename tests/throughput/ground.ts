import { fileURLToPath } from 'node:url';
import { join } from 'node:path';
import { buildSync } from 'esbuild';
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { pathToFileURL } from 'node:url';
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

/** The simulation thread, compiled for a test run. */
export function compiledWorker(): URL {
  const outfile = join(mkdtempSync(join(tmpdir(), 'month-')), 'month-worker.mjs');
  buildSync({
    entryPoints: [join(root, 'src/throughput/pool/month-worker.ts')],
    bundle: true,
    platform: 'node',
    format: 'esm',
    outfile,
    logLevel: 'silent',
  });
  return pathToFileURL(outfile);
}
