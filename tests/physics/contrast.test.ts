import { describe, expect, it } from 'vitest';
import { targetContrast } from '../../src/physics/index.js';

describe('contrast of a round target', () => {
  const target = Float64Array.from(
    { length: 256 },
    (_, i) => 0.6 * Math.exp(-Math.abs(i - 128) / 60),
  );
  const background = Float64Array.from(
    { length: 256 },
    (_, i) => 0.25 * Math.exp(-Math.abs(i - 128) / 30),
  );
  const at = (diameterMm: number, sliceThicknessMm = 5) =>
    targetContrast(target, background, {
      diameterMm,
      pixelPhaseMm: 0.9,
      pixelFrequencyMm: 0.9,
      sliceThicknessMm,
    });

  it('large: the plain difference at the centre of k-space', () => {
    expect(at(200)).toBeCloseTo(0.35, 2);
  });
  it('vanishing: none', () => {
    expect(Math.abs(at(0.05))).toBeLessThan(1e-3);
  });
  it('grows with size from 1 to 15 mm, and falls with slice thickness', () => {
    const sizes = [1, 2, 3, 4, 6, 8, 10, 15].map((d) => at(d));
    for (let n = 1; n < sizes.length; n++) expect(sizes[n] ?? 0).toBeGreaterThan(sizes[n - 1] ?? 0);
    expect(at(4, 3)).toBeGreaterThan(at(4, 6));
  });
  it('changes sign with the tissues', () => {
    const g = { diameterMm: 4, pixelPhaseMm: 0.9, pixelFrequencyMm: 0.9, sliceThicknessMm: 5 };
    const dark = targetContrast(background, target, g);
    expect(dark).toBeLessThan(0);
    expect(dark).toBeCloseTo(-targetContrast(target, background, g), 9);
  });
});
