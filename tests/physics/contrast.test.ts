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

  it.each([2, 4, 7])('of %d mm is what summing a ball of small cubes gives', (diameterMm) => {
    // Brute force: every cube of the ball inside the pixel's column and the slice adds the difference of the spreads.
    const step = 0.05;
    const [pixelPhaseMm, pixelFrequencyMm, sliceThicknessMm] = [0.9, 0.7, 4];
    const reach = Math.ceil(diameterMm / 2 / step);
    let sum = 0;
    for (let j = -reach; j < reach; j++) {
      const y = (j + 0.5) * step;
      let cubes = 0;
      for (let i = 0; i < pixelFrequencyMm / step; i++) {
        const x = (i + 0.5) * step - pixelFrequencyMm / 2;
        for (let k = 0; k < sliceThicknessMm / step; k++) {
          const z = (k + 0.5) * step - sliceThicknessMm / 2;
          if (x * x + y * y + z * z <= (diameterMm / 2) ** 2) cubes += 1;
        }
      }
      let spread = 0;
      for (let line = 0; line < 256; line++) {
        const angle = (2 * Math.PI * (line - 128) * y) / pixelPhaseMm / 256;
        spread += ((target[line]! - background[line]!) * Math.cos(angle)) / 256;
      }
      sum += (spread * cubes * step ** 3) / (pixelPhaseMm * pixelFrequencyMm * sliceThicknessMm);
    }
    const g = { diameterMm, pixelPhaseMm, pixelFrequencyMm, sliceThicknessMm };
    expect(targetContrast(target, background, g) / sum).toBeCloseTo(1, 2);
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
