import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  atSeconds,
  chanceWithin,
  convolve,
  lognormal,
  meanS,
  mixture,
  quantileS,
  repeats,
  type Distribution,
} from '../../src/planning/distribution.js';
import { stream } from './instances.js';

const total = (d: Distribution): number => d.p.reduce((sum, mass) => sum + mass, 0);
const varianceOf = (d: Distribution): number =>
  d.p.reduce((sum, mass, i) => sum + mass * (d.startS + i - meanS(d)) ** 2, 0);

describe('time as probability mass on whole seconds', () => {
  // Source: definition of a point mass with the mean kept.
  it('splits a fraction of a second so that the mean is kept', () => {
    expect(atSeconds(12)).toEqual({ startS: 12, p: Float64Array.of(1) });
    expect(meanS(atSeconds(12.3))).toBeCloseTo(12.3, 12);
    expect(atSeconds(12.25).p).toEqual(Float64Array.of(0.75, 0.25));
  });

  // Source: definition of the lognormal by its first two moments.
  it('keeps mean and coefficient of variation of a lognormal', () => {
    for (const [mean, cv] of [
      [90, 0.3],
      [400, 0.19],
      [1500, 0.29],
    ] as const) {
      const d = lognormal(mean, cv);
      // The cut tails beyond one in a million take up to about a ten-thousandth of the spread with them.
      expect(Math.abs(meanS(d) / mean - 1)).toBeLessThan(2e-5);
      expect(Math.abs(Math.sqrt(varianceOf(d)) / mean / cv - 1)).toBeLessThan(2e-3);
    }
    expect(lognormal(300, 0)).toEqual(atSeconds(300));
  });

  // Source: T6 of the checks (slot factor times mean, lognormal), derived from normal quantiles.
  it('gives the slot factors of lognormal service', () => {
    const mean = 36_000;
    for (const [cv, factors] of [
      [0.19, [1.151, 1.251, 1.339]],
      [0.29, [1.22, 1.382, 1.533]],
    ] as const) {
      const d = lognormal(mean, cv);
      [0.8, 0.9, 0.95].forEach((p, i) =>
        expect(Math.abs(quantileS(d, p) / mean - factors[i]!)).toBeLessThan(6e-4),
      );
    }
  });

  // Source: binomial mean and variance; n = 3 by hand.
  it('counts repeats as a binomial', () => {
    const three = repeats(3, 0.2, 10);
    expect(chanceWithin(three, 0)).toBeCloseTo(0.512, 12);
    expect(chanceWithin(three, 10)).toBeCloseTo(0.512 + 0.384, 12);
    const many = repeats(40, 0.15, 7);
    expect(meanS(many)).toBeCloseTo(40 * 0.15 * 7, 8);
    expect(varianceOf(many)).toBeCloseTo(40 * 0.15 * 0.85 * 49, 6);
    expect(meanS(repeats(5, 1, 12))).toBeCloseTo(60, 12);
  });

  // Source: Monte Carlo on a pinned stream; lognormal draws by Box and Muller 1958.
  it('convolves as independent times add, within the standard error of 200,000 draws', () => {
    const random = stream('convolution', 1);
    const normal = () => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());
    const draw = (mean: number, cv: number) => {
      const variance = Math.log1p(cv * cv);
      return Math.exp(Math.log(mean) - variance / 2 + Math.sqrt(variance) * normal());
    };
    const sum = [
      lognormal(420, 0.3),
      lognormal(90, 0.5),
      repeats(6, 0.2, 17),
      atSeconds(300),
    ].reduce(convolve);
    const draws = 200_000;
    const limitsS = [780, 830, 900, 1_000, 1_150];
    const within = limitsS.map(() => 0);
    for (let i = 0; i < draws; i++) {
      let timeS = draw(420, 0.3) + draw(90, 0.5) + 300;
      for (let k = 0; k < 6; k++) if (random() < 0.2) timeS += 17;
      limitsS.forEach((limitS, k) => (within[k]! += timeS <= limitS + 0.5 ? 1 : 0));
    }
    limitsS.forEach((limitS, k) => {
      const share = within[k]! / draws;
      const standardError = Math.sqrt((share * (1 - share)) / draws);
      expect(Math.abs(chanceWithin(sum, limitS) - share)).toBeLessThan(4 * standardError);
    });
  });

  // Source: probability axioms; property-based over generated times.
  it('keeps all mass and adds means and variances, whatever is combined', () => {
    const part = fc.oneof(
      fc.double({ min: 0, max: 400, noNaN: true }).map(atSeconds),
      fc
        .tuple(
          fc.double({ min: 1, max: 900, noNaN: true }),
          fc.double({ min: 0, max: 0.6, noNaN: true }),
        )
        .map(([mean, cv]) => lognormal(mean, cv)),
      fc
        .tuple(fc.integer({ min: 0, max: 30 }), fc.double({ min: 0, max: 1, noNaN: true }))
        .map(([n, chance]) => repeats(n, chance, 11.5)),
    );
    fc.assert(
      fc.property(part, part, fc.double({ min: 0.01, max: 0.99, noNaN: true }), (a, b, weight) => {
        const sum = convolve(a, b);
        const either = mixture([
          { weight, of: a },
          { weight: 1 - weight, of: b },
        ]);
        for (const d of [a, b, sum, either]) {
          expect(Math.abs(total(d) - 1)).toBeLessThan(1e-9);
          expect(d.p.every((mass) => mass >= 0)).toBe(true);
        }
        expect(meanS(sum)).toBeCloseTo(meanS(a) + meanS(b), 6);
        expect(varianceOf(sum) / (1 + varianceOf(a) + varianceOf(b))).toBeCloseTo(
          (varianceOf(a) + varianceOf(b)) / (1 + varianceOf(a) + varianceOf(b)),
          6,
        );
        expect(meanS(either)).toBeCloseTo(weight * meanS(a) + (1 - weight) * meanS(b), 6);
      }),
      { seed: 20, numRuns: 150 },
    );
  });

  // Source: definition of a quantile.
  it('has quantiles that are the first second reaching the probability', () => {
    const d = lognormal(300, 0.4);
    for (const p of [0, 0.01, 0.5, 0.9, 0.999, 1]) {
      const q = quantileS(d, p);
      expect(chanceWithin(d, q)).toBeGreaterThanOrEqual(p - 1e-9);
      if (q > d.startS) expect(chanceWithin(d, q - 1)).toBeLessThan(p);
    }
  });

  // Source: house rule that nothing is invented from unusable input.
  it('refuses values that mean nothing', () => {
    expect(() => atSeconds(-1)).toThrow(/number of seconds/);
    expect(() => atSeconds(NaN)).toThrow();
    expect(() => lognormal(-5, 0.2)).toThrow();
    expect(() => lognormal(5, -0.2)).toThrow();
    expect(() => repeats(1.5, 0.2, 10)).toThrow();
    expect(() => repeats(2, 1.2, 10)).toThrow();
    expect(() => mixture([])).toThrow();
  });
});
