import { describe, expect, it } from 'vitest';
import { atSeconds, lognormal, mixture } from '../../src/planning/distribution.js';
import { randomStream } from '../../src/shared/index.js';
import {
  checkScenario,
  compareRuns,
  findingsOf,
  firstScenarios,
  kindsOf,
  meanWithLimits,
  measureFigure,
  slotAdvice,
  slotBalance,
  differencesOf,
  simulateMonth,
  type MonthRecord,
  type Scenario,
} from '../../src/throughput/index.js';
import { exponential } from '../../src/throughput/variates.js';
import { queued } from './queues.js';
import { ground, requests, usual, worked } from './ground.js';

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
    const [more, worse, rest] = findingsOf(differencesOf(after, before), 60);
    expect(more!.verdict).toBe('better');
    expect(more!.sentence).toMatch(
      /^Answers 2\.1 more questions diagnostically a day \(1\.\d to 2\.\d\)\.$/,
    );
    expect(worse!.verdict).toBe('worse');
    expect(worse!.sentence).toMatch(/^Needs 10\.2 more minutes of overtime a day/);
    expect(rest!.sentence).toMatch(/^Unchanged within what 60 days can tell: patients served/);
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

describe('the mix of requests', () => {
  it('comes in the wanted shares, by exam and by group at once', () => {
    const kinds = kindsOf(requests, {
      examShares: { knee: 0.5, 'brain-general': 0.3, liver: 0.2 },
      groupShares: { settled: 0.6, restless: 0.4 },
    });
    const booked = kinds.filter((k) => k.group !== 'emergency');
    const sum = (of: (k: (typeof booked)[number]) => boolean) =>
      booked.filter(of).reduce((a, k) => a + k.weight, 0);
    expect(sum((k) => k.request.examId === 'knee')).toBeCloseTo(0.5, 3);
    expect(sum((k) => k.request.examId === 'liver')).toBeCloseTo(0.2, 3);
    expect(sum((k) => k.group === 'restless')).toBeCloseTo(0.4, 3);
    expect(sum(() => true)).toBeCloseTo(1, 9);
  });

  it('is that of the records when nothing is wanted', () => {
    const kinds = kindsOf([...requests, ...requests]);
    expect(kinds.length).toBeLessThanOrEqual(requests.length);
    const knees = requests.filter((r) => r.examId === 'knee').length;
    const booked = requests.filter(
      (r) => r.tolerance.patientClass !== 'emergency' && r.priority !== 'stat',
    );
    const share = kinds
      .filter((k) => k.request.examId === 'knee')
      .reduce((a, k) => a + k.weight, 0);
    expect(share).toBeCloseTo(knees / booked.length, 9);
  });
});

describe('a bad scenario gets a word at its field', () => {
  const examIds = [...ground.library.exams.keys()];
  const fields = (change: Partial<Scenario>) =>
    checkScenario({ ...usual, ...change }, { examIds }).map((p) => p.field);

  it('none of the shipped ones has any', () => {
    for (const scenario of firstScenarios(usual))
      expect(checkScenario(scenario, { examIds })).toEqual([]);
  });

  it.each<[string, Partial<Scenario>, string]>([
    ['no scanner', { scanners: [] }, 'scanners'],
    [
      '30-hour days',
      { scanners: [{ ...usual.scanners[0]!, hours: [{ fromMin: 0, toMin: 30 * 60 }] }] },
      'hours mr1',
    ],
    ['the same scanner twice', { scanners: [usual.scanners[0]!, usual.scanners[0]!] }, 'scanners'],
    ['negative rates', { requestsPerDay: -3 }, 'requestsPerDay'],
    ['no number at all', { emergenciesPerDay: Number.NaN }, 'emergenciesPerDay'],
    ['shares above one', { lateShare: 11 }, 'lateShare'],
    ['a million days', { months: 500, daysAMonth: 60 }, 'months'],
    ['a million months', { months: 1_000_000 }, 'months'],
    ['half a scanner team', { teams: [{ name: 'play', count: 0.5, groups: ['child'] }] }, 'teams'],
    ['slots of seven minutes', { slots: { kind: 'fixed', minutes: 7 } }, 'slots'],
    ['slots of two hours', { slots: { kind: 'tolerance', mostMin: 120 } }, 'slots'],
    ['an exam nobody knows', { examShares: { elbow: 1 } }, 'examShares'],
    ['shares that are all 0', { groupShares: { settled: 0 } }, 'groupShares'],
    ['no name', { name: ' ' }, 'name'],
  ])('%s', (_, change, field) => {
    expect(fields(change)).toEqual([field]);
  });

  it('says value, limit and way out', () => {
    const [first] = checkScenario({ ...usual, requestsPerDay: -3 }, { examIds });
    expect(first!.problem).toMatchObject({
      value: '-3',
      limit: expect.stringContaining('from 0 to 500'),
    });
    expect(first!.problem.wayOut).not.toBe('');
  });
});
