import type { ExamRequest, PlanningGround } from '../../planning/index.js';
import { compareRuns, type Comparison } from '../compare.js';
import { PlanBook } from '../plan-book.js';
import type { Scenario } from '../scenario.js';
import { workOut, type WorkedOut } from '../work-out.js';
import { simulateMonths } from './month-pool.js';

export interface RunOptions {
  /** Threads that months are simulated in; planning is done by the caller's own. */
  readonly threads: number;
  readonly signal?: AbortSignal;
  readonly workerFile?: URL;
  readonly onPlanned?: (done: number, of: number) => void;
  readonly onMonth?: (done: number, of: number) => void;
  /** Plans kept from an earlier run on the same ground. */
  readonly book?: PlanBook;
}

/** Works scenarios out, simulates their months in threads and compares them; a stopped run compares what is done. */
export async function runScenarios(
  scenarios: readonly Scenario[],
  requests: readonly ExamRequest[],
  ground: PlanningGround,
  options: RunOptions,
): Promise<Comparison> {
  const book = options.book ?? new PlanBook(ground);
  const worked: WorkedOut[] = [];
  for (const [n, scenario] of scenarios.entries()) {
    const run = workOut(scenario, requests, ground, book);
    let step = run.next();
    while (step.done !== true) {
      const { done, of } = step.value;
      options.onPlanned?.(n * of + done, scenarios.length * of);
      await new Promise<void>((resolve) => setImmediate(resolve));
      if (options.signal?.aborted === true) return compareRuns([], true);
      step = run.next();
    }
    worked.push(step.value);
  }
  const months = Math.max(...scenarios.map((s) => s.months));
  const { threads, signal, workerFile, onMonth } = options;
  const { months: records, stopped } = await simulateMonths(
    worked.map((w) => w.department),
    {
      threads,
      months,
      ...(signal === undefined ? {} : { signal }),
      ...(workerFile === undefined ? {} : { workerFile }),
      ...(onMonth === undefined ? {} : { onMonth }),
    },
  );
  return compareRuns(
    scenarios.map(({ name, daysAMonth }, n) => ({
      ...{ name, daysAMonth },
      months: records[n] ?? [],
      leftOut: worked[n]!.leftOut,
      kinds: worked[n]!.kinds,
    })),
    stopped,
  );
}
