import { describe, expect, it } from 'vitest';
import { chanceWithin, meanS, quantileS } from '../../src/planning/distribution.js';
import { sequenceTime } from '../../src/planning/table-time.js';
import { isNoLater } from '../../src/planning/solver/spent-time.js';

describe('table time of one sequence', () => {
  // Source: by hand.
  it('is acquisition and pause when nothing is repeated', () => {
    expect(sequenceTime({ acquisitionS: 240, idleS: 30, repeatChance: 0 })).toEqual({
      startS: 270,
      p: Float64Array.of(1),
    });
  });

  // Source: by hand; one repeat at most, with a pause of its own.
  it('runs once more with the repeat chance', () => {
    const d = sequenceTime({ acquisitionS: 200, idleS: 20, repeatChance: 0.25 });
    expect(chanceWithin(d, 219)).toBe(0);
    expect(chanceWithin(d, 220)).toBeCloseTo(0.75, 12);
    expect(chanceWithin(d, 439)).toBeCloseTo(0.75, 12);
    expect(chanceWithin(d, 440)).toBe(1);
  });

  // Source: binomial by hand.
  it('takes spoiled pieces again one by one', () => {
    const d = sequenceTime({
      acquisitionS: 60,
      idleS: 0,
      repeatChance: 0,
      retake: { intervals: 4, intervalS: 15, spoilChance: 0.1 },
    });
    expect(chanceWithin(d, 60)).toBeCloseTo(0.9 ** 4, 12);
    expect(chanceWithin(d, 75)).toBeCloseTo(0.9 ** 4 + 4 * 0.1 * 0.9 ** 3, 12);
    expect(meanS(d)).toBeCloseTo(60 + 4 * 0.1 * 15, 9);
  });

  // Source: lognormal median exp(mu), by hand.
  it('spreads a triggered acquisition around its mean', () => {
    const d = sequenceTime({ acquisitionS: 300, idleS: 20, repeatChance: 0, variation: 0.2 });
    expect(meanS(d)).toBeCloseTo(320, 1);
    const median = 300 / Math.sqrt(1 + 0.2 ** 2) + 20;
    // Kept on points a sixth of the deviation apart (10 s of 60 s), so a quantile is known to half of that.
    expect(Math.abs(quantileS(d, 0.5) - median)).toBeLessThanOrEqual(5);
  });

  // Source: stochastic order; more to go wrong never ends earlier.
  it('is never earlier with a higher chance of repeats', () => {
    const at = (repeatChance: number, spoilChance: number) =>
      sequenceTime({
        acquisitionS: 180,
        idleS: 25,
        repeatChance,
        retake: { intervals: 5, intervalS: 36, spoilChance },
      });
    expect(isNoLater(at(0.1, 0.1), at(0.2, 0.1))).toBe(true);
    expect(isNoLater(at(0.1, 0.1), at(0.1, 0.3))).toBe(true);
    expect(isNoLater(at(0.2, 0.1), at(0.1, 0.1))).toBe(false);
  });

  it('refuses a chance outside 0 to 1', () => {
    expect(() => sequenceTime({ acquisitionS: 60, idleS: 0, repeatChance: 1.1 })).toThrow(
      /between/,
    );
  });
});
