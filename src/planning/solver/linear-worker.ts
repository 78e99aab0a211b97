import { Worker } from 'node:worker_threads';

/** Maximise `goal` over columns >= 0, the first `wholes` of them whole numbers. */
export interface Programme {
  readonly columns: number;
  readonly wholes: number;
  readonly goal: readonly number[];
  readonly rows: readonly ProgrammeRow[];
}

/** Sum of values times columns is at most `most`. */
export interface ProgrammeRow {
  readonly most: number;
  readonly at: readonly number[];
  readonly values: readonly number[];
}

export type ProgrammeAnswer =
  | { readonly kind: 'solved'; readonly feasible: boolean; readonly values: Float64Array }
  | { readonly kind: 'failed'; readonly why: string }
  | { readonly kind: 'out-of-time' };

/** One solver thread, kept between solves, ended by the wall clock and started afresh when next needed. */
export interface ProgrammeThread {
  /** One at a time: the caller waits for an answer before it asks again. */
  solve(programme: Programme, limitMs: number): Promise<ProgrammeAnswer>;
  close(): Promise<void>;
}

interface Reply {
  readonly id: number;
}

export function programmeThread(): ProgrammeThread {
  let worker: Worker | undefined;
  let lastId = 0;

  const started = (): Worker => {
    if (worker === undefined) {
      // No flags of ours: a loader for TypeScript would only slow the plain script down.
      const fresh = new Worker(new URL('./jslp-worker.mjs', import.meta.url), { execArgv: [] });
      const forget = (): void => {
        if (worker === fresh) worker = undefined;
      };
      fresh.on('error', forget).on('exit', forget).unref();
      worker = fresh;
    }
    return worker;
  };
  const end = async (): Promise<void> => {
    const ended = worker;
    worker = undefined;
    await ended?.terminate();
  };

  return {
    solve: (programme, limitMs) =>
      new Promise((resolve) => {
        const running = started();
        const id = ++lastId;
        // Keep the process alive while an answer is awaited, and only then.
        running.ref();
        const finish = (answer: ProgrammeAnswer, dead: boolean): void => {
          clearTimeout(clock);
          running.off('message', onMessage).off('error', onError).off('exit', onExit);
          running.unref();
          if (dead && worker === running) void end();
          resolve(answer);
        };
        const onMessage = (reply: Reply & ProgrammeAnswer): void => {
          if (reply.id === id) finish(reply, false);
        };
        const onError = (error: unknown): void => {
          finish({ kind: 'failed', why: String(error) }, true);
        };
        const onExit = (): void => finish({ kind: 'failed', why: 'the solver thread ended' }, true);
        const clock = setTimeout(() => finish({ kind: 'out-of-time' }, true), Math.max(0, limitMs));
        running.on('message', onMessage).on('error', onError).on('exit', onExit);
        running.postMessage({ id, programme });
      }),
    close: end,
  };
}
