import { parentPort, workerData } from 'node:worker_threads';
import { openEvidence } from '../../planning/index.js';
import { simulateMonth } from '../month.js';
import { serveDesk } from './desk-work.js';
import type { MonthAnswer, MonthTask, Role } from './month-pool.js';

/** A thread that simulates the months it is given, one after the other, or one that plans and compares for a server. */
const given = workerData as Role;

if (parentPort !== null && given.role === 'months') {
  const { departments } = given;
  const port = parentPort;
  port.on('message', (task: MonthTask) => {
    const record = simulateMonth(departments[task.scenario]!, task.month);
    port.postMessage({ ...task, record } satisfies MonthAnswer);
  });
}
if (parentPort !== null && given.role === 'desk') {
  const { library } = given;
  serveDesk(parentPort, { library, evidence: openEvidence(library) });
}
