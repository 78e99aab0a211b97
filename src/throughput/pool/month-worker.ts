import { parentPort, workerData } from 'node:worker_threads';
import { simulateMonth } from '../month.js';
import type { MonthAnswer, MonthTask } from './month-pool.js';
import type { SimDepartment } from '../sim-department.js';

/** A thread that simulates the months it is given, one after the other, of the departments it was started with. */
const departments = workerData as readonly SimDepartment[];

parentPort?.on('message', (task: MonthTask) => {
  const record = simulateMonth(departments[task.scenario]!, task.month);
  parentPort?.postMessage({ ...task, record } satisfies MonthAnswer);
});
