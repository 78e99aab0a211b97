import type { MessagePort } from 'node:worker_threads';
import type { ExamRequest, PlanningGround } from '../../planning/index.js';
import { adviceTable } from '../advice-table.js';
import { PlanBook } from '../plan-book.js';
import type { DeskAnswer, DeskAsked, DeskMessage, RequestsAsText } from './desk-messages.js';
import { runScenarios } from './run-scenarios.js';

/** Does what the server asks of its month thread; several at once take turns, and each can be stopped. */
export function serveDesk(port: MessagePort, ground: PlanningGround): void {
  const book = new PlanBook(ground);
  const stops = new Map<number, AbortController>();
  const say = (answer: DeskAnswer) => port.postMessage(answer);

  port.on('message', (message: DeskMessage) => {
    if (message.kind === 'stop') stops.get(message.id)?.abort();
    else void work(message);
  });

  async function work(asked: DeskAsked): Promise<void> {
    const { id } = asked;
    const stop = new AbortController();
    stops.set(id, stop);
    try {
      const value = await (asked.kind === 'compare'
        ? compare(asked, stop.signal)
        : advise(asked, stop.signal));
      say({ kind: 'done', id, value });
    } catch (error) {
      const why = error instanceof Error ? (error.stack ?? error.message) : String(error);
      say({ kind: 'failed', id, why });
    } finally {
      stops.delete(id);
    }
  }

  function compare(asked: Extract<DeskAsked, { kind: 'compare' }>, signal: AbortSignal) {
    const { id, scenarios, requests, threads, workerFile } = asked;
    return runScenarios(scenarios, read(requests), ground, {
      ...{ threads, book, signal },
      ...(workerFile === undefined ? {} : { workerFile: new URL(workerFile) }),
      onPlanned: (done, of) => say({ kind: 'planned', id, done, of }),
      onMonth: (done, of) => say({ kind: 'month', id, done, of }),
    });
  }

  async function advise(asked: Extract<DeskAsked, { kind: 'advice' }>, signal: AbortSignal) {
    const { id, requests, scanners, asked: wanted } = asked;
    const run = adviceTable(read(requests), scanners, ground, book, wanted);
    let step = run.next();
    while (step.done !== true) {
      say({ kind: 'planned', id, ...step.value });
      await new Promise<void>((resolve) => setImmediate(resolve));
      if (signal.aborted) return [];
      step = run.next();
    }
    return step.value;
  }
}

const read = (requests: RequestsAsText) => JSON.parse(requests) as readonly ExamRequest[];
