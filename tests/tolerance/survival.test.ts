import jstat from 'jstat';
import { describe, expect, it } from 'vitest';
import {
  conditional,
  longestWith,
  weibullThrough,
  weibullWithMean,
} from '../../src/tolerance/index.js';

describe('survival curves', () => {
  // Calibration points derived in the checks (operations, section 1): rate = -ln(1-p)/T with T = 25 min,
  // p = 0.075, 0.294, 0.198 give 0.00312, 0.01393, 0.00883 per minute; the middle one a mean of 71.8 min.
  it.each([
    [0.075, 0.00312],
    [0.294, 0.01393],
    [0.198, 0.00883],
  ])('a motion share of %d within 25 min is a hazard of %d per minute', (share, rate) => {
    const survival = weibullThrough(1 - share, 25);
    expect(-Math.log(survival(1))).toBeCloseTo(rate, 5);
  });

  it('the middle one has a mean of 71.8 min', () => {
    const survival = weibullThrough(1 - 0.294, 25);
    let mean = 0;
    for (let t = 0; t < 2000; t += 0.1) mean += survival(t + 0.05) * 0.1;
    expect(mean).toBeCloseTo(71.8, 1);
  });

  it('passes through its calibration point whatever the shape, and is 1 at the start', () => {
    for (const shape of [0.7, 1, 1.5, 2.9]) {
      const survival = weibullThrough(0.8, 240, shape);
      expect(survival(240)).toBeCloseTo(0.8, 12);
      expect(survival(0)).toBe(1);
    }
  });

  it('agrees with a statistics library', () => {
    // Weibull distribution of jstat 1.9.6: S = 1 - cdf.
    const shape = 2.9;
    const survival = weibullWithMean(24, shape);
    const scale = 24 / jstat.gammafn(1 + 1 / shape);
    for (let t = 1; t < 60; t += 3) {
      expect(survival(t)).toBeCloseTo(1 - jstat.weibull.cdf(t, scale, shape), 9);
    }
    // Shape 2.9 has a coefficient of variation of 0.375, that of expiratory holds in patients, 24 +- 9 s
    // (Groell 2001).
    const variance =
      scale ** 2 * (jstat.gammafn(1 + 2 / shape) - jstat.gammafn(1 + 1 / shape) ** 2);
    expect(Math.sqrt(variance) / 24).toBeCloseTo(0.375, 2);
  });

  it('constant hazard forgets the past; a rising one does not', () => {
    const constant = weibullThrough(0.8, 240, 1);
    const rising = weibullThrough(0.8, 240, 1.5);
    expect(conditional(constant, 600, 60)).toBeCloseTo(constant(60), 12);
    expect(conditional(rising, 600, 60)).toBeLessThan(rising(60));
  });

  it('finds the longest time that leaves a wished chance', () => {
    const survival = weibullThrough(0.8, 1200);
    expect(longestWith(survival, 0.8)).toBeCloseTo(1200, 2);
    expect(longestWith(survival, 0.64)).toBeCloseTo(2400, 2);
  });
});
