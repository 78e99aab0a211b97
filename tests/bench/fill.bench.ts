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

/** Three seconds or a little less on the two-core machine this was written on. */
const iterations = 10_000;
const fillWeek = (seed: number) =>
  fillAll(week(seed), { random: stream('bench', seed), iterations });

/** Eight weeks, kind and unkind ones: what is reached, and how far below the own and the HiGHS bound. */
async function eightWeeks(): Promise<string> {
  const weeks: string[] = [];
  const below = (reached: number, top: number) => 100 * Math.max(0, 1 - reached / top);
  let worst = 0;
  let slowestMs = 0;
  for (let seed = 1; seed <= 8; seed++) {
    const linear = (await highsDay(week(seed), 'relaxed')) as number;
    const began = performance.now();
    const { objective, bound } = fillWeek(seed);
    slowestMs = Math.max(slowestMs, performance.now() - began);
    const own = below(objective.diagnostic, bound.diagnostic);
    const highs = below(objective.diagnostic, linear);
    worst = Math.max(worst, own, highs);
    weeks.push(
      `${objective.diagnostic}/${bound.diagnostic}/${linear.toFixed(1)} ${own.toFixed(2)}/${highs.toFixed(2)} %`,
    );
  }
  return `reached/own/HiGHS bound, % below own/HiGHS: ${weeks.join('; ')}; worst ${worst.toFixed(2)} %, slowest ${slowestMs.toFixed(0)} ms`;
}

export const cases = async (): Promise<BenchCase[]> => {
  const seed = 1;
  const problem = week(seed);
  const events = Array.from({ length: 40 }, (_, i) =>
    generatedEvent(i, { scanners: 2 + (i % 3), days: 1 + (i % 2), requests: 50, teams: 0.08 }),
  ).filter((e) => e !== undefined);
  let next = 0;
  return [
    {
      name: `fill, 4 scanners x 80 x 5 days, ${iterations} iterations; eight weeks: ${await eightWeeks()}`,
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
