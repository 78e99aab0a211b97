import jstat from 'jstat';
import { describe, expect, it } from 'vitest';
import { randomStream } from '../../src/shared/index.js';
import { studentQuantile } from '../../src/throughput/student-t.js';
import {
  binomial,
  exponential,
  lognormalFactor,
  normalQuantile,
  poisson,
} from '../../src/throughput/variates.js';

/** Against jStat, a statistics library of its own making. */
describe('random quantities', () => {
  it('the normal quantile agrees with the library and with the published digits', () => {
    for (const p of [1e-9, 1e-4, 0.01, 0.075, 0.3, 0.5, 0.6, 0.93, 0.999, 1 - 1e-7])
      expect(normalQuantile(p)).toBeCloseTo(jstat.normal.inv(p, 0, 1), 6);
    // Algorithm AS 241 (Wichura 1988) prints these for checking.
    expect(normalQuantile(0.25)).toBeCloseTo(-0.6744897501960817, 14);
    expect(normalQuantile(0.001)).toBeCloseTo(-3.090232306167814, 13);
    expect(normalQuantile(1e-20)).toBeCloseTo(-9.262340089798408, 12);
  });

  it("Student's t quantile agrees with the library and with printed tables", () => {
    for (const degrees of [1, 2, 5, 9, 19, 39, 120])
      for (const p of [0.6, 0.9, 0.975, 0.995, 0.025])
        expect(studentQuantile(p, degrees)).toBeCloseTo(jstat.studentt.inv(p, degrees), 6);
    // Printed tables of the t distribution, 97.5 %: 12.706 (1), 2.262 (9), 2.093 (19).
    expect(studentQuantile(0.975, 1)).toBeCloseTo(12.706, 3);
    expect(studentQuantile(0.975, 9)).toBeCloseTo(2.262, 3);
    expect(studentQuantile(0.975, 19)).toBeCloseTo(2.093, 3);
  });

  it('a lognormal quantity of mean 1 has the quantiles that the library gives', () => {
    for (const cv of [0.19, 0.25, 0.5, 1]) {
      const sigma = Math.sqrt(Math.log1p(cv * cv));
      for (const p of [0.05, 0.5, 0.9])
        expect(lognormalFactor(normalQuantile(p), cv)).toBeCloseTo(
          jstat.lognormal.inv(p, -(sigma ** 2) / 2, sigma),
          6,
        );
    }
  });

  it('slot factors of a lognormal exam time: 80, 90 and 95 % at variations of 0.19 and 0.29', () => {
    // Checks, section 6, T6, derived there.
    const factor = (p: number, cv: number) => lognormalFactor(normalQuantile(p), cv);
    expect([0.8, 0.9, 0.95].map((p) => Number(factor(p, 0.19).toFixed(3)))).toEqual([
      1.151, 1.251, 1.339,
    ]);
    expect([0.8, 0.9, 0.95].map((p) => Number(factor(p, 0.29).toFixed(3)))).toEqual([
      1.22, 1.382, 1.533,
    ]);
  });

  it('counts are the smallest whose cumulative chance exceeds the number drawn', () => {
    const next = randomStream(1, 'counts');
    for (let i = 0; i < 300; i++) {
      const u = next();
      for (const mean of [0.3, 4, 62]) {
        const k = poisson(u, mean);
        expect(jstat.poisson.cdf(k, mean)).toBeGreaterThan(u - 1e-9);
        if (k > 0) expect(jstat.poisson.cdf(k - 1, mean)).toBeLessThanOrEqual(u + 1e-9);
      }
      const k = binomial(u, 24, 0.13);
      expect(jstat.binomial.cdf(k, 24, 0.13)).toBeGreaterThan(u - 1e-9);
      if (k > 0) expect(jstat.binomial.cdf(k - 1, 24, 0.13)).toBeLessThanOrEqual(u + 1e-9);
    }
  });

  it('a Poisson count of a large mean does not vanish', () => {
    const next = randomStream(2, 'counts');
    const n = 2000;
    let sum = 0;
    for (let i = 0; i < n; i++) sum += poisson(next(), 900);
    // Standard error of the mean: sqrt(900 / n).
    expect(Math.abs(sum / n - 900)).toBeLessThan(4 * Math.sqrt(900 / n));
  });

  it('exponential quantities have their mean', () => {
    const next = randomStream(3, 'times');
    const n = 40_000;
    let sum = 0;
    for (let i = 0; i < n; i++) sum += exponential(next(), 7);
    expect(Math.abs(sum / n - 7)).toBeLessThan((4 * 7) / Math.sqrt(n));
  });
});
