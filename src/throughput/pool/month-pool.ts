import { Worker } from 'node:worker_threads';
import type { SiteLibrary } from '../../exams/index.js';
import type { MonthRecord } from '../month-record.js';
import type { SimDepartment } from '../sim-department.js';

/** What a thread of this folder is started for. */
export type Role =
  | { readonly role: 'months'; readonly departments: readonly SimDepartment[] }
  | { readonly role: 'desk'; readonly library: SiteLibrary };

export interface MonthTask {
  readonly scenario: number;
  readonly month: number;
}

export interface MonthAnswer extends MonthTask {
  readonly record: MonthRecord;
}

export interface PoolOptions {
  readonly threads: number;
  /** Months per scenario. */
  readonly months: number;
  /** Ends the run early; what is done stays. */
  readonly signal?: AbortSignal;
  readonly onMonth?: (done: number, of: number) => void;
  /** The compiled thread; the one beside this file unless given. */
  readonly workerFile?: URL;
}

/** What a run left: per scenario its months in order, and whether it was stopped. */
export interface PoolRun {
  readonly months: readonly (readonly MonthRecord[])[];
  readonly stopped: boolean;
}

/**
 * Simulates the months of several scenarios in threads. A month depends on its scenario and number alone, so the result is the
 * same on any number of threads. Months are handed out number by number over all scenarios: a stopped run has nearly
 * the same months of each, and keeps of each what is complete from the first month on.
 *
 * @throws what a thread throws
 */
export async function simulateMonths(
  departments: readonly SimDepartment[],
  options: PoolOptions,
): Promise<PoolRun> {
  const { threads, months, signal, onMonth } = options;
  const workerFile = options.workerFile ?? new URL('./month-worker.js', import.meta.url);
  const tasks = Array.from({ length: months }, (_, month) => month).flatMap((month) =>
    departments.map((_, scenario): MonthTask => ({ scenario, month })),
  );
  const done: (MonthRecord | undefined)[][] = departments.map(() => []);
  let finished = 0;
  let next = 0;
  const workers = Array.from(
    { length: Math.max(1, Math.min(threads, tasks.length)) },
    () => new Worker(workerFile, { workerData: { role: 'months', departments } satisfies Role }),
  );
  try {
    await Promise.all(
      workers.map(
        (worker) =>
          new Promise<void>((resolve, reject) => {
            const stop = () => resolve();
            const give = () => {
              const task = signal?.aborted === true ? undefined : tasks[next++];
              if (task === undefined) resolve();
              else worker.postMessage(task);
            };
            signal?.addEventListener('abort', stop, { once: true });
            worker.on('error', reject);
            worker.on('exit', (code) => {
              if (code !== 0) reject(new Error(`a simulation thread ended with code ${code}`));
            });
            worker.on('message', ({ scenario, month, record }: MonthAnswer) => {
              if (signal?.aborted === true) return;
              done[scenario]![month] = record;
              finished += 1;
              onMonth?.(finished, tasks.length);
              give();
            });
            give();
          }),
      ),
    );
  } finally {
    for (const worker of workers) worker.removeAllListeners('exit');
    await Promise.all(workers.map((worker) => worker.terminate()));
  }
  return { months: done.map(unbroken), stopped: finished < tasks.length };
}

/** Months from the first on, up to the first that is missing. */
function unbroken(months: readonly (MonthRecord | undefined)[]): readonly MonthRecord[] {
  const kept: MonthRecord[] = [];
  for (const month of months) {
    if (month === undefined) break;
    kept.push(month);
  }
  return kept;
}
