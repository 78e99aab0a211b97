import { setTimeout as wait } from 'node:timers/promises';
import { ProblemError } from '../shared/index.js';
import { judgeFault } from './fault.js';

const mostAttempts = 60;
const longestWaitMs = 150;

/**
 * Does a piece of work again while the database is busy with somebody else's. The driver itself waits
 * only a few milliseconds, because on SQLite that wait stops the whole process; the long wait is here.
 */
export async function retried<T>(work: () => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await work();
    } catch (thrown) {
      const { tryAgain, error } = judgeFault(thrown);
      if (!tryAgain) throw error;
      if (attempt === mostAttempts) throw busy(attempt);
    }
    await wait(Math.min(2 * attempt, longestWaitMs));
  }
}

const busy = (attempts: number) =>
  new ProblemError({
    code: 'store-busy',
    thing: 'database',
    value: `busy in ${attempts} attempts`,
    limit: 'another program must not keep it locked for seconds',
    wayOut: 'Nothing was written. Close what holds it (a backup, a second server), then try again.',
  });
