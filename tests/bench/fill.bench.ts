import { upperBound } from '../../src/day/fill-bound.js';
import { layOut } from '../../src/day/fill-problem.js';
import { fillAll, mend } from '../../src/day/index.js';
import { inventedDepartment } from '../day/departments.js';
import { generatedEvent } from '../day/events.js';
import { highsDay } from '../day/highs-day.js';
import { stream } from '../planning/instances.js';
import type { BenchCase } from './run.js';

/** A crowded week: 4 scanners, 80 requests, 5 days of three hours across noon. */
const week = (seed: number) =>
  inventedDepartment(seed, { scanners: 4, days: 5, requests: 80, taken: 10, hours: [630, 810] });

export const cases = async (): Promise<BenchCase[]> => {
  const seed = 2;
  const problem = week(seed);
  const linear = (await highsDay(problem, 'relaxed')) as number;
  const filled = fillAll(problem, { random: stream('bench', seed), iterations: 20_000 });
  const reached = filled.objective.diagnostic;
  const below = (bound: number) => `${(100 * (1 - reached / bound)).toFixed(2)} %`;
  const events = Array.from({ length: 40 }, (_, i) =>
    generatedEvent(i, { scanners: 2 + (i % 3), days: 1 + (i % 2), requests: 50, teams: 0.08 }),
  ).filter((e) => e !== undefined);
  let next = 0;
  return [
    {
      name: `fill, 4 scanners x 80 x 5 days, 20,000 iterations: ${below(filled.bound.diagnostic)} below its bound, ${below(linear)} below the HiGHS one`,
      subject: () => fillAll(problem, { random: stream('bench', seed), iterations: 20_000 }),
      limitMs: 3000,
    },
    {
      name: 'bound of that week, against HiGHS on the linear relaxation',
      subject: () => upperBound(layOut(problem), 'diagnostic', 0),
      reference: () => highsDay(problem, 'relaxed'),
      limitMs: 500,
    },
    {
      name: 'mend, an event on a full day of 2 to 4 scanners',
      subject: () => mend(events[next++ % events.length]!),
      rounds: events.length,
      limitMs: 100,
    },
  ];
};
