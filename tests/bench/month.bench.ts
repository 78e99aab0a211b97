import { simulateMonth, type Scenario } from '../../src/throughput/index.js';
import { simulateMonths } from '../../src/throughput/pool/month-pool.js';
import { compiledWorker } from '../throughput/compiled-worker.js';
import { usual, worked } from '../throughput/ground.js';
import type { BenchCase } from './run.js';

/** Four scanners, sixty exams a day. */
const four: Scenario = {
  ...usual,
  scanners: [...usual.scanners, { ...usual.scanners[0]!, id: 'mr4', name: 'Scanner 4' }],
  technologists: 4,
  requestsPerDay: 57,
  listAtStart: 60,
  emergenciesPerDay: 2,
  slots: { kind: 'tolerance', mostMin: 60 },
  content: 'planned',
  quickLooks: true,
};
const days = 10_000;

/** Megabytes in use once everything that can go has gone. */
function heapMb(): number {
  (globalThis as { gc?: () => void }).gc?.();
  return process.memoryUsage().heapUsed / 2 ** 20;
}

export const cases = async (): Promise<BenchCase[]> => {
  const { department } = worked(four);
  const workerFile = compiledWorker();
  const inThreads = (threads: number) =>
    simulateMonths([department], { threads, months: days / department.daysAMonth, workerFile });
  const short = await inThreads(2);
  const exams =
    short.months[0]!.reduce((sum, m) => sum + m.patientsPerDay, 0) / short.months[0]!.length;
  const grown = [1000, 10_000].map((daysAMonth) => {
    const before = heapMb();
    simulateMonth({ ...department, daysAMonth }, 0);
    return (heapMb() - before).toFixed(1);
  });
  return [
    {
      name: `month: ${days} department-days, 4 scanners, ${exams.toFixed(0)} exams a day, 2 threads against 1; heap grown after 1,000 and 10,000 days in one month: ${grown.join(', ')} MB`,
      subject: () => inThreads(2),
      reference: () => inThreads(1),
      rounds: 5,
      limitMs: 5000,
    },
  ];
};
