import { describe, expect, it } from 'vitest';
import { atSeconds, lognormal, mixture } from '../../src/planning/distribution.js';
import { randomStream } from '../../src/shared/index.js';
import {
  compareRuns,
  findingsOf,
  meanWithLimits,
  measureFigure,
  slotAdvice,
  slotBalance,
  differencesOf,
  estimatesOf,
  measureWords,
  simulateMonth,
  type MonthRecord,
} from '../../src/throughput/index.js';
import { exponential } from '../../src/throughput/variates.js';
import { queued } from './queues.js';
import { usual, worked } from './ground.js';

describe('limits of a mean', () => {
  it('by hand: 4, 6, 8 have mean 6 and limits 6 -+ 4.303 * 2 / sqrt(3)', () => {
    // Printed t table: 4.303 for 2 degrees of freedom.
    const { mean, low, high } = meanWithLimits([4, 6, 8]);
    expect(mean).toBe(6);
    expect(high - 6).toBeCloseTo((4.303 * 2) / Math.sqrt(3), 2);
    expect(6 - low).toBeCloseTo(high - 6, 12);
  });

  it('one month cannot say how far it is off', () => {
    expect(meanWithLimits([4]).high).toBe(Infinity);
    expect(measureFigure('patientsPerDay', Infinity)).toBe('?');
  });

  it('what cannot be negative has no negative limit, a difference may', () => {
    const month = simulateMonth(worked(usual).department, 0);
    const months = [0, 30].map((m) => ({ ...month, overtimeMinPerDay: m, overrunShare: m / 30 }));
    expect(estimatesOf(months).overtimeMinPerDay).toMatchObject({ mean: 15, low: 0 });
    expect(estimatesOf(months).overrunShare).toMatchObject({ mean: 0.5, low: 0, high: 1 });
    const other = months.map((m) => ({ ...m, overtimeMinPerDay: 0 }));
    expect(differencesOf(other, months).overtimeMinPerDay.low).toBeLessThan(0);
  });

  it('95 % limits cover the known answer in 93 to 97 % of 1,000 repeats', () => {
    // The known answer: checks, section 6, T2: five patients at the mean, exponential service, mean wait 0.5854.
    const exact = 0.5854;
    let covered = 0;
    for (let repeat = 0; repeat < 1000; repeat++) {
      const next = randomStream(repeat, 'coverage');
      const months = Array.from({ length: 20 }, () => {
        let sum = 0;
        for (let day = 0; day < 20; day++) {
          const services = Array.from({ length: 5 }, () => exponential(next(), 1));
          sum += queued([0, 1, 2, 3, 4], services).waits.reduce((a, b) => a + b, 0) / 5;
        }
        return sum / 20;
      });
      const { low, high } = meanWithLimits(months);
      if (low <= exact && exact <= high) covered += 1;
    }
    expect(covered).toBeGreaterThanOrEqual(930);
    expect(covered).toBeLessThanOrEqual(970);
  });

  it('pairing on the same patients narrows the limits of a difference', () => {
    const first = worked(usual).department;
    const second = worked({ ...usual, bufferMin: 5 }).department;
    const paired: MonthRecord[][] = [[], []];
    const apart: MonthRecord[] = [];
    for (let m = 0; m < 12; m++) {
      paired[0]!.push(simulateMonth(first, m));
      paired[1]!.push(simulateMonth(second, m));
      apart.push(simulateMonth({ ...second, seed: 99 }, m));
    }
    const width = (months: readonly MonthRecord[]) => {
      const { low, high } = differencesOf(months, paired[0]!).diagnosticPerDay;
      return high - low;
    };
    expect(width(paired[1]!)).toBeLessThan(0.8 * width(apart));
  });
});

describe('findings', () => {
  const record = (diagnosticPerDay: number, overtimeMinPerDay: number) => ({
    ...simulateMonth(worked(usual).department, 0),
    diagnosticPerDay,
    overtimeMinPerDay,
  });

  it('say better, worse and what the days cannot tell', () => {
    const before = [record(50, 10), record(51, 12), record(49, 11)];
    const after = [record(52, 20), record(53.1, 22.5), record(51.2, 21)];
    const [more, worse, rest] = findingsOf(differencesOf(after, before), {
      ...{ before: estimatesOf(before), after: estimatesOf(after), months: 3, days: 60 },
    });
    expect(more!.verdict).toBe('better');
    expect(more!.sentence).toMatch(
      /^2\.1 \(1\.\d to 2\.\d\) more questions a day are answered diagnostically: 52\.1 instead of 50\.0\.$/,
    );
    expect(worse!.verdict).toBe('worse');
    expect(worse!.sentence).toMatch(/^10\.2 \(\d+\.\d to \d+\.\d\) more minutes of overtime a day/);
    expect(rest!.sentence).toMatch(
      /^No difference, or none beyond chance, in 60 simulated days: patients served/,
    );
  });

  it('fewer is said as fewer, and a shorter wait as less', () => {
    const wait = (waitNinetiethMin: number) => ({ ...record(50, 10), waitNinetiethMin });
    const [before, after] = [
      [wait(12), wait(13)],
      [wait(6), wait(7.01)],
    ];
    const run = { daysAMonth: 20, leftOut: [] };
    const { scenarios } = compareRuns([
      { ...run, name: 'A', months: before },
      { ...run, name: 'B', months: after },
    ]);
    expect(scenarios[1]!.findings[0]).toMatchObject({
      verdict: 'better',
      sentence:
        'Nine of ten patients wait no longer than 6.5 min instead of 12.5: 6.0 (5.9 to 6.1) min less.',
    });
  });

  it('one month alone decides nothing, and a run without a month finds nothing', () => {
    const run = { name: 'A', months: [record(50, 10)], daysAMonth: 20, leftOut: [] };
    const [, one] = compareRuns([run, { ...run, months: [record(60, 10)] }]).scenarios;
    expect(one!.findings.map((f) => f.sentence)).toEqual([
      'One month alone cannot tell a change from chance: simulate two or more.',
    ]);
    const [, none] = compareRuns([run, { ...run, months: [] }], true).scenarios;
    expect(none!.findings).toEqual([]);
  });

  it('a difference too small to print is none', () => {
    const home = (sentHomePerDay: number) => ({ ...record(50, 10), sentHomePerDay });
    const run = { daysAMonth: 20, leftOut: [] };
    const [, other] = compareRuns([
      { ...run, name: 'A', months: [home(0), home(0)] },
      { ...run, name: 'B', months: [home(0.004), home(0.00401)] },
    ]).scenarios;
    expect(other!.findings).toHaveLength(1);
    expect(other!.findings[0]!.sentence).toContain('sent home');
  });

  it('every sentence about quick looks says that they are not diagnostic', () => {
    for (const { name, means, change } of Object.values(measureWords))
      for (const words of [name, means, ...change])
        if (/quick look|screening/i.test(words)) expect(words).toMatch(/not\W+diagnostic/i);
  });

  it('a scenario against its own copy changes nothing', () => {
    const months = [record(50, 10), record(51, 12)];
    const run = { name: 'A', months, daysAMonth: 20, leftOut: [] };
    const [, copy] = compareRuns([run, { ...run, name: 'B' }]).scenarios;
    expect(copy!.findings).toHaveLength(1);
    expect(copy!.findings[0]!.verdict).toBe('unchanged');
  });
});

describe('slot advice', () => {
  it('exponential table time of mean 1: the optimum is ln(1 + r) (checks, section 6, T5)', () => {
    // On a grid of a second with a mean of 3600 s the tail is kept to 1e-9.
    const rate = 1 / 3600;
    const points = Array.from({ length: 75_000 }, (_, s) => ({
      weight: Math.exp(-s * rate) - Math.exp(-(s + 1) * rate),
      of: atSeconds(s + 0.5),
    }));
    const time = mixture(points);
    for (const [r, optimum] of [
      [1, 0.6931],
      [2, 1.0986],
      [4, 1.6094],
    ] as const) {
      const { exactMin } = slotAdvice(time, { chance: 0.9, lateCost: r, idleCost: 1 });
      expect(exactMin / 60).toBeCloseTo(optimum, 2);
    }
    const { lateMin, idleMin } = slotBalance(time, 60 * Math.log(2), { lateCost: 1, idleCost: 1 });
    expect(lateMin / 60).toBeCloseTo(0.5, 3);
    expect(idleMin / 60).toBeCloseTo(0.1931, 3);
  });

  it('normal overrun beyond its quantiles: 0.3989, 0.1116, 0.0473, 0.0209 deviations (T5)', () => {
    // A lognormal time of small variation is nearly normal: mean 3600 s, deviation 36 s.
    const time = lognormal(3600, 0.01);
    for (const [z, over] of [
      [0, 0.3989],
      [0.8416, 0.1116],
      [1.2816, 0.0473],
      [1.6449, 0.0209],
    ] as const) {
      const { lateMin } = slotBalance(time, (3600 + 36 * z) / 60, { lateCost: 1, idleCost: 1 });
      expect((lateMin * 60) / 36).toBeCloseTo(over, 2);
    }
  });

  it('the cheapest slot on the grid lies beside the exact optimum, and costs grow to both sides', () => {
    const time = lognormal(1500, 0.25);
    const advice = slotAdvice(time, { chance: 0.9, lateCost: 3, idleCost: 1 });
    expect(Math.abs(advice.cheapestMin - advice.exactMin)).toBeLessThanOrEqual(5);
    const costs = advice.balances.map((b) => b.cost);
    const best = costs.indexOf(Math.min(...costs));
    for (let i = 1; i < costs.length; i++)
      expect(i <= best ? costs[i]! < costs[i - 1]! : costs[i]! > costs[i - 1]!).toBe(true);
    // T6: 90 % of a lognormal of variation 0.29 lies below 1.382 times its mean.
    const wide = slotAdvice(lognormal(1800, 0.29), { chance: 0.9, lateCost: 1, idleCost: 1 });
    expect(wide.forChanceMin).toBe(5 * Math.ceil((30 * 1.382) / 5));
  });
});
