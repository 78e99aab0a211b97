import jstat from 'jstat';
import { describe, expect, it } from 'vitest';
import {
  atRiskAt,
  chiSquareTail,
  curveAt,
  kaplanMeier,
  limitsAt,
  logRank,
  medianOf,
  restrictedMean,
  type Followed,
} from '../../src/tolerance/index.js';

const ended = (times: readonly number[]): Followed[] =>
  times.map((time) => ({ time, censored: false }));
const seenTo = (times: readonly number[]): Followed[] =>
  times.map((time) => ({ time, censored: true }));

// Weeks in remission of acute leukaemia: Freireich and others, Blood 1963;21:699, raw data as in the survival chapter at
// issuhub.com/view/index/5551 page 402. 541 weeks and 30 events in all (data.princeton.edu/eco572/KaplanMeier.html).
// The values derived from them (checks, operations, T7) match those of the textbooks.
const mercaptopurine = [
  ...ended([6, 6, 6, 7, 10, 13, 16, 22, 23]),
  ...seenTo([6, 9, 10, 11, 17, 19, 20, 25, 32, 32, 34, 35]),
];
const placebo = ended([1, 1, 2, 2, 3, 4, 4, 5, 5, 8, 8, 8, 8, 11, 11, 12, 12, 15, 17, 22, 23]);

describe('the leukaemia trial', () => {
  it('is the data meant: 541 weeks, 30 events', () => {
    const all = [...mercaptopurine, ...placebo];
    expect(all.reduce((sum, f) => sum + f.time, 0)).toBe(541);
    expect(all.filter((f) => !f.censored)).toHaveLength(30);
  });

  it.each([
    [6, 21, 0.8571, 0.0764],
    [7, 17, 0.8067, 0.0869],
    [10, 15, 0.7529, 0.0963],
    [13, 12, 0.6902, 0.1068],
    [16, 11, 0.6275, 0.1141],
    [22, 7, 0.5378, 0.1282],
    [23, 6, 0.4482, 0.1346],
  ])('at week %d: %d at risk, S %d, standard error %d', (week, atRisk, survival, error) => {
    const curve = kaplanMeier(mercaptopurine);
    const step = curve.steps.find((s) => s.time === week)!;
    expect(step.atRisk).toBe(atRisk);
    expect(atRiskAt(curve, week)).toBe(atRisk);
    expect(step.survival).toBeCloseTo(survival, 4);
    expect(step.standardError).toBeCloseTo(error, 4);
  });

  it('medians of 23 and 8 weeks, means within 35 weeks of 23.29 and 8.67', () => {
    const [treated, untreated] = [kaplanMeier(mercaptopurine), kaplanMeier(placebo)];
    expect(treated.steps).toHaveLength(7);
    expect([medianOf(treated), medianOf(untreated)]).toEqual([23, 8]);
    expect(restrictedMean(treated, 35)).toBeCloseTo(23.29, 2);
    expect(restrictedMean(untreated, 35)).toBeCloseTo(8.67, 2);
  });

  it('log-rank 16.793: 9 observed, 19.25 expected, variance 6.257; the same seen from the other side', () => {
    const test = logRank(mercaptopurine, placebo);
    expect(test.observed).toBe(9);
    expect(test.expected).toBeCloseTo(19.25, 2);
    expect(test.variance).toBeCloseTo(6.257, 3);
    expect(test.chiSquare).toBeCloseTo(16.793, 3);
    const turned = logRank(placebo, mercaptopurine);
    expect(turned.chiSquare).toBeCloseTo(test.chiSquare, 10);
    expect(turned.observed + test.observed).toBeCloseTo(turned.expected + test.expected, 10);
  });
});

describe('survival curves from censored times', () => {
  it('the small table of Crit Care 2004;8:389, Table 2', () => {
    const curve = kaplanMeier([...ended([1, 1, 4, 5, 9, 22]), ...seenTo([6, 9])]);
    expect(curve.steps.map((s) => Number(s.survival.toFixed(3)))).toEqual([
      0.75, 0.625, 0.5, 0.333, 0,
    ]);
    expect(curve.records).toBe(8);
    expect(curve.censored).toBe(2);
  });

  it('without censoring it is the plain share that is left, with the binomial standard error', () => {
    const curve = kaplanMeier(ended([1, 2, 3, 4, 5, 6, 7, 8, 9, 10]));
    for (let t = 1; t < 10; t++) {
      const { survival, standardError } = curveAt(curve, t + 0.5);
      expect(survival).toBeCloseTo(1 - t / 10, 12);
      expect(standardError).toBeCloseTo(Math.sqrt((survival * (1 - survival)) / 10), 12);
    }
  });

  it('with no event the curve stays at 1 and its mean is the whole span; with none at all nothing breaks', () => {
    const curve = kaplanMeier(seenTo([5, 8, 9]));
    expect(curveAt(curve, 9).survival).toBe(1);
    expect(restrictedMean(curve, 9)).toBe(9);
    expect(medianOf(curve)).toBeUndefined();
    expect(kaplanMeier([])).toMatchObject({ records: 0, steps: [], lastTime: 0 });
  });

  // S 0.88 with standard error 0.065 has limits 0.673 and 0.960 on the log(-log) scale (worked example at
  // clayford.net/statistics/category/survival-analysis). A curve with that value at one step.
  it('limits on the log(-log) scale', () => {
    const one = {
      steps: [{ time: 13, atRisk: 25, events: 3, survival: 0.88, standardError: 0.065 }],
      ...{ records: 25, censored: 0, lastTime: 13, censoredAt: [] },
    };
    const { low, high } = limitsAt(one, 13);
    expect(low).toBeCloseTo(0.673, 3);
    expect(high).toBeCloseTo(0.96, 3);
  });

  it('where nobody had the event the lower limit is the exact binomial one', () => {
    const { low, high } = limitsAt(kaplanMeier(seenTo(Array<number>(30).fill(20))), 20);
    expect(high).toBe(1);
    // 30 of 30: lower exact limit 0.8843 (Clopper and Pearson 1934; the value from memory).
    expect(low).toBeCloseTo(0.8843, 4);
    expect(jstat.binomial.pdf(30, 30, low)).toBeCloseTo(0.025, 6);
  });
});

describe('the tail of a chi-square', () => {
  it('agrees with a statistics library', () => {
    // jstat 1.9.6, chi-square with one degree of freedom.
    for (const x of [0.001, 0.1, 0.5, 1, 2.5, 3.84, 5, 7.9, 8.1, 10, 16.793, 25]) {
      expect(chiSquareTail(x)).toBeCloseTo(1 - jstat.chisquare.cdf(x, 1), 9);
    }
    expect(chiSquareTail(0)).toBe(1);
    expect(chiSquareTail(3.841458820694124)).toBeCloseTo(0.05, 12);
  });
});
