import { Worker } from 'node:worker_threads';
import type { Scanner } from '../../day/index.js';
import type { SiteLibrary } from '../../exams/index.js';
import type { ExamRequest } from '../../planning/index.js';
import type { AdviceRow } from '../advice-table.js';
import type { Comparison } from '../compare.js';
import type { Scenario } from '../scenario.js';
import type { AdviceAsked } from '../slot-advice.js';
import type { DeskAnswer, DeskAsked, DeskMessage } from './desk-messages.js';
import type { Role } from './month-pool.js';

export interface DeskOptions {
  readonly library: SiteLibrary;
  /** Threads that the months of one comparison are simulated in. */
  readonly threads: number;
  /** The compiled thread; the one beside this file unless given. */
  readonly workerFile?: URL;
}

export interface Watch {
  /** Ends it early; a comparison keeps what is done, advice has no rows then. */
  readonly signal?: AbortSignal;
  readonly onPlanned?: (done: number, of: number) => void;
  readonly onMonth?: (done: number, of: number) => void;
}

interface Waiting extends Watch {
  readonly resolve: (value: unknown) => void;
  readonly reject: (error: Error) => void;
}

type Unnumbered<T> = T extends unknown ? Omit<T, 'id'> : never;

/**
 * The month for a server: a thread of its own plans, simulates (in further threads) and compares, so that no other reader waits
 * for a plan. Plans are kept between questions. It begins with the first question and keeps no process alive by itself.
 */
export class MonthDesk {
  private thread: Worker | undefined;
  private readonly waiting = new Map<number, Waiting>();
  private last = 0;

  constructor(private readonly options: DeskOptions) {}

  /** @throws Error what broke inside the thread */
  compare(
    scenarios: readonly Scenario[],
    requests: readonly ExamRequest[],
    watch: Watch = {},
  ): Promise<Comparison> {
    const { threads, workerFile } = this.options;
    return this.ask(
      {
        ...{ kind: 'compare', scenarios, requests: JSON.stringify(requests), threads },
        ...(workerFile === undefined ? {} : { workerFile: workerFile.href }),
      },
      watch,
    ) as Promise<Comparison>;
  }

  /** @throws Error what broke inside the thread */
  advise(
    requests: readonly ExamRequest[],
    scanners: readonly Scanner[],
    asked: AdviceAsked & { readonly quickLooks: boolean },
    watch: Watch = {},
  ): Promise<readonly AdviceRow[]> {
    return this.ask(
      { kind: 'advice', requests: JSON.stringify(requests), scanners, asked },
      watch,
    ) as Promise<readonly AdviceRow[]>;
  }

  private ask(asked: Unnumbered<DeskAsked>, watch: Watch): Promise<unknown> {
    const id = ++this.last;
    this.thread ??= this.begin();
    const { thread } = this;
    return new Promise((resolve, reject) => {
      this.waiting.set(id, { ...watch, resolve, reject });
      const say = (message: DeskMessage) => thread.postMessage(message);
      watch.signal?.addEventListener('abort', () => say({ kind: 'stop', id }), { once: true });
      say({ ...asked, id });
      if (watch.signal?.aborted === true) say({ kind: 'stop', id });
    });
  }

  private begin(): Worker {
    const file = this.options.workerFile ?? new URL('./month-worker.js', import.meta.url);
    const { library } = this.options;
    const thread = new Worker(file, { workerData: { role: 'desk', library } satisfies Role });
    thread.unref();
    thread.on('message', (answer: DeskAnswer) => this.hear(answer));
    thread.on('error', (error) => this.broken(thread, error));
    thread.on('exit', (code) =>
      this.broken(thread, new Error(`the month thread ended with code ${code}`)),
    );
    return thread;
  }

  private hear(answer: DeskAnswer): void {
    const asker = this.waiting.get(answer.id);
    if (answer.kind === 'planned') return asker?.onPlanned?.(answer.done, answer.of);
    if (answer.kind === 'month') return asker?.onMonth?.(answer.done, answer.of);
    this.waiting.delete(answer.id);
    if (answer.kind === 'done') asker?.resolve(answer.value);
    else asker?.reject(new Error(answer.why));
  }

  /** Whoever waited is told; the next question begins a new thread. */
  private broken(thread: Worker, error: Error): void {
    if (this.thread !== thread) return;
    this.thread = undefined;
    const asked = [...this.waiting.values()];
    this.waiting.clear();
    for (const { reject } of asked) reject(error);
  }
}
