import { describe, expect, it } from 'vitest';
import { besselJ1, besselJ1Over } from '../../src/physics/bessel.js';

/** Bessel's integral, mean of cos(theta - x sin theta) over a period: the trapezium rule is exact for it in practice. */
function byIntegral(x: number): number {
  const points = 4096;
  let sum = 0;
  for (let n = 0; n < points; n++) {
    const theta = (2 * Math.PI * n) / points;
    sum += Math.cos(theta - x * Math.sin(theta));
  }
  return sum / points;
}

describe('the Bessel function J1', () => {
  it('is what its integral says, from 0 to 900', () => {
    for (let x = 0; x < 900; x += x < 12 ? 0.05 : 3.7) {
      expect(Math.abs(besselJ1(x) - byIntegral(x)), String(x)).toBeLessThan(1e-7);
    }
  });
  it('is zero at 3.8317 and 7.0156', () => {
    // From memory, any table of Bessel zeros.
    expect(Math.abs(besselJ1(3.83170597))).toBeLessThan(1e-7);
    expect(Math.abs(besselJ1(7.01558667))).toBeLessThan(1e-7);
  });
  it('over its argument comes out of the table as out of the integral, between the steps and beyond the end', () => {
    for (let x = 0.0007; x < 900; x += x < 12 ? 0.0313 : 3.71) {
      expect(Math.abs(besselJ1Over(x) - byIntegral(x) / x), String(x)).toBeLessThan(1e-7);
    }
    // Limit at 0 by the series x/2 - x^3/16 + ... (from memory).
    expect(besselJ1Over(0)).toBe(0.5);
  });
});
