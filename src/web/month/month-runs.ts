import { createHash } from 'node:crypto';
import type { ExamRequest, PlanningGround } from '../../planning/index.js';
import { ProblemError } from '../../shared/index.js';
import type { Comparison, Scenario } from '../../throughput/index.js';
import { MonthDesk } from '../../throughput/pool/month-desk.js';

export interface MonthRun {
  readonly id: string;
  readonly scenarios: readonly Scenario[];
  /** Requests on record that the mix rests on. */
  readonly records: number;
  readonly state: 'running' | 'done' | 'stopped' | 'failed';
  /** What it is at, in words, and how far, 0..1. */
  readonly at: string;
  readonly share: number;
  readonly comparison?: Comparison;
}

interface Running extends MonthRun {
  readonly stop: AbortController;
}

export interface MonthRunsOptions {
  readonly ground: PlanningGround;
  readonly threads: number;
  readonly workerFile?: URL;
  readonly log: (line: string, detail?: Record<string, unknown>) => void;
}

const mostAtOnce = 2;
/** Finished runs kept to be looked at again. */
export const mostKept = 20;

/**
 * Simulations of this server: started, watched, stopped. The same scenarios on the same records are the same run, whoever asks:
 * its address can be shared while the server runs, and asking again shows what is there.
 */
export class MonthRuns {
  private readonly runs = new Map<string, Running>();
  /** The thread that plans and simulates, for every page that asks. */
  readonly desk: MonthDesk;
  private readonly log: MonthRunsOptions['log'];

  constructor({ ground, threads, workerFile, log }: MonthRunsOptions) {
    this.log = log;
    this.desk = new MonthDesk({
      ...{ library: ground.library, threads },
      ...(workerFile === undefined ? {} : { workerFile }),
    });
  }

  /** @throws ProblemError when others are running already */
  start(scenarios: readonly Scenario[], requests: readonly ExamRequest[]): MonthRun {
    const id = runId(scenarios, requests);
    const known = this.runs.get(id);
    if (known !== undefined && (known.state === 'running' || known.state === 'done')) return known;
    const running = [...this.runs.values()].filter((r) => r.state === 'running').length;
    if (running >= mostAtOnce)
      throw new ProblemError({
        code: 'month-busy',
        thing: 'simulation',
        value: `${running} are running`,
        limit: `at most ${mostAtOnce} at once`,
        wayOut: 'Wait for one to end, or stop it on its page.',
      });
    const run: Running = {
      ...{ id, scenarios, records: requests.length, state: 'running', share: 0 },
      at: 'planning what each kind of patient gets',
      stop: new AbortController(),
    };
    this.runs.delete(id);
    this.runs.set(id, run);
    this.forgetOldest();
    void this.run(run, requests);
    return run;
  }

  get(id: string): MonthRun | undefined {
    return this.runs.get(id);
  }

  /** Newest first. */
  list(): readonly MonthRun[] {
    return [...this.runs.values()].reverse();
  }

  stop(id: string): void {
    this.runs.get(id)?.stop.abort();
  }

  stopAll(): void {
    for (const run of this.runs.values()) run.stop.abort();
  }

  private async run(run: Running, requests: readonly ExamRequest[]): Promise<void> {
    const update = (change: Partial<MonthRun>) => {
      const now = this.runs.get(run.id);
      if (now !== undefined) this.runs.set(run.id, { ...now, ...change });
    };
    try {
      const comparison = await this.desk.compare(run.scenarios, requests, {
        signal: run.stop.signal,
        onPlanned: (done, of) => update({ share: (planningShare * done) / of }),
        onMonth: (done, of) =>
          update({
            at: `month ${done} of ${of}`,
            share: planningShare + ((1 - planningShare) * done) / of,
          }),
      });
      const enough =
        comparison.scenarios.length > 0 && comparison.scenarios.every((s) => s.months.length > 0);
      update({
        state: comparison.stopped ? 'stopped' : 'done',
        share: 1,
        ...(enough ? { comparison } : {}),
      });
    } catch (error) {
      this.log('simulation failed', {
        error: error instanceof Error ? error.stack : String(error),
      });
      update({ state: 'failed' });
    }
  }

  private forgetOldest(): void {
    for (const [id, run] of this.runs) {
      if (this.runs.size <= mostKept) return;
      if (run.state !== 'running') this.runs.delete(id);
    }
  }
}

/** Part of the bar that planning takes. */
const planningShare = 0.5;

const runId = (scenarios: readonly Scenario[], requests: readonly ExamRequest[]) =>
  createHash('sha256')
    .update(JSON.stringify([scenarios, requests]))
    .digest('hex')
    .slice(0, 12);
