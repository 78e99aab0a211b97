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

const iterations = 15_000;
const fillWeek = (seed: number) =>
  fillAll(week(seed), { random: stream('bench', seed), iterations });

export const cases = async (): Promise<BenchCase[]> => {
  // Three weeks: one that reaches its bound, two that do not.
  const weeks: string[] = [];
  for (const seed of [1, 2, 7]) {
    const linear = (await highsDay(week(seed), 'relaxed')) as number;
    const { objective, bound } = fillWeek(seed);
    const below = (top: number) => (100 * Math.max(0, 1 - objective.diagnostic / top)).toFixed(2);
    weeks.push(`${below(bound.diagnostic)}/${below(linear)}`);
  }
  const seed = 1;
  const problem = week(seed);
  const events = Array.from({ length: 40 }, (_, i) =>
    generatedEvent(i, { scanners: 2 + (i % 3), days: 1 + (i % 2), requests: 50, teams: 0.08 }),
  ).filter((e) => e !== undefined);
  let next = 0;
  return [
    {
      name: `fill, 4 scanners x 80 x 5 days, ${iterations} iterations; % below own/HiGHS bound, three weeks: ${weeks.join(', ')}`,
      subject: () => fillWeek(seed),
      limitMs: 3000,
    },
    {
      name: 'fill: bound of that week, against HiGHS on the linear relaxation',
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
