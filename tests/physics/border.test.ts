import { describe, expect, it } from 'vitest';
import { borderWidthMm } from '../../src/physics/index.js';

describe('border between two tissues', () => {
  const flat = (value: number) => new Float64Array(256).fill(value);

  it('without decay is the 10-90 % rise of a sinc step', () => {
    // Sine integral: 1/2 + Si(pi x)/pi = 0.9 at x = 0.2230 + ...; solved here by its own series, source: definition of Si.
    const si = (x: number) => {
      let sum = 0;
      let term = x;
      for (let n = 0; n < 60; n++) {
        sum += term / (2 * n + 1);
        term *= (-x * x) / ((2 * n + 2) * (2 * n + 3));
      }
      return sum;
    };
    let low = 0;
    let high = 1;
    for (let n = 0; n < 60; n++) {
      const middle = (low + high) / 2;
      if (0.5 + si(Math.PI * middle) / Math.PI < 0.9) low = middle;
      else high = middle;
    }
    expect(borderWidthMm(flat(1), flat(0), 1)).toBeCloseTo(2 * low, 2);
  });

  it('does not depend on which side is which, nor on a common scale', () => {
    const a = Float64Array.from({ length: 256 }, (_, i) => Math.exp(-Math.abs(i - 128) / 200));
    const b = Float64Array.from({ length: 256 }, (_, i) => 0.4 * Math.exp(-Math.abs(i - 128) / 30));
    expect(borderWidthMm(a, b, 0.9)).toBeCloseTo(borderWidthMm(b, a, 0.9), 6);
    expect(borderWidthMm(a, b, 0.9)).toBeCloseTo(
      borderWidthMm(
        a.map((v) => v * 7),
        b.map((v) => v * 7),
        0.9,
      ),
      6,
    );
  });

  it('is wider when the bright side is the one that decays', () => {
    const steady = flat(1);
    const decaying = Float64Array.from({ length: 256 }, (_, i) =>
      Math.exp(-Math.abs(i - 128) / 12),
    );
    expect(borderWidthMm(decaying, flat(0), 1)).toBeGreaterThan(
      2 * borderWidthMm(steady, flat(0), 1),
    );
  });

  it('is nowhere between two equally bright tissues', () => {
    expect(borderWidthMm(flat(0.5), flat(0.5), 1)).toBe(Infinity);
  });
});
