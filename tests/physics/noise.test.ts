import { describe, expect, it } from 'vitest';
import { relativeNoise, type NoiseFactors } from '../../src/physics/index.js';

const base: NoiseFactors = {
  voxelMm3: 4,
  acquiredLines: 256,
  averages: 1,
  readoutMs: 5,
  fieldT: 1.5,
  parallelFactor: 1,
  geometryFactor: 1,
  partialFourierFraction: 1,
};
const snr = (given: Partial<NoiseFactors>) => 1 / relativeNoise({ ...base, ...given });

describe('noise', () => {
  // Laws as printed in the checks, section 5 (Edelstein 1986; Macovski 1996; Pruessmann 1999).
  it('half the field of view in both directions quarters the signal-to-noise', () => {
    expect(snr({ voxelMm3: 1 }) / snr({})).toBeCloseTo(1 / 4, 12);
  });
  it('half the bandwidth (twice the readout) gains sqrt 2', () => {
    expect(snr({ readoutMs: 10 }) / snr({})).toBeCloseTo(Math.SQRT2, 12);
  });
  it('n averages gain sqrt n', () => {
    for (const n of [2, 3, 4, 8])
      expect(snr({ averages: n }) / snr({})).toBeCloseTo(Math.sqrt(n), 12);
  });
  it('a printed table of scan time against signal-to-noise holds', () => {
    // AJNR table, checks section 5: 100/51/23/15/8 % of the time, sqrt gives 71.4/48.0/38.7/28.3 %.
    for (const [time, percent] of [
      [0.51, 71.4],
      [0.23, 48],
      [0.15, 38.7],
      [0.08, 28.3],
    ] as const) {
      expect((100 * snr({ averages: time })) / snr({})).toBeCloseTo(percent, 1);
    }
  });
  it('partial Fourier costs sqrt of the fraction', () => {
    for (const [f, factor] of [
      [0.5625, 0.75],
      [0.6, 0.7746],
      [0.625, 0.7906],
    ] as const) {
      expect(snr({ acquiredLines: 256 * f, partialFourierFraction: f }) / snr({})).toBeCloseTo(
        factor,
        4,
      );
    }
  });
  it('parallel imaging costs g sqrt R, once', () => {
    expect(
      snr({ acquiredLines: 128, parallelFactor: 2, geometryFactor: 1.1 }) / snr({}),
    ).toBeCloseTo(1 / (1.1 * Math.SQRT2), 12);
  });
  it('grows with the field', () => {
    expect(snr({ fieldT: 3 }) / snr({})).toBeCloseTo(2, 12);
  });
});
