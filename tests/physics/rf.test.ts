import { describe, expect, it } from 'vitest';
import { b1RmsMicroTesla, relativeEnergy, type RfPulse } from '../../src/physics/index.js';

describe('RF exposure', () => {
  const hard = (flipDeg: number): RfPulse => ({ flipDeg, durationMs: 1, shapeFactor: 1 });
  const energy = (angles: readonly number[]) =>
    b1RmsMicroTesla(angles.map(hard), 1000) ** 2 / b1RmsMicroTesla([hard(90)], 1000) ** 2;
  const train = (count: number, deg: number) => [90, ...new Array<number>(count).fill(deg)];

  it('a hard 180 of 1 ms needs 11.74 microtesla', () => {
    expect(b1RmsMicroTesla([hard(180)], 1)).toBeCloseTo(11.74, 2);
  });
  it.each([
    // Relative energy per train, unit one 90 degree pulse: derived, checks section 6.
    [1, 180, 5],
    [8, 180, 33],
    [16, 180, 65],
    [16, 150, 45.44],
    [16, 120, 29.44],
    [128, 180, 513],
    [128, 150, 356.56],
    [128, 120, 228.56],
    [128, 90, 129],
  ])('90 and %d x %d degrees: %d', (count, deg, units) => {
    expect(energy(train(count, deg))).toBeCloseTo(units, 2);
  });
  it('refocusing by 120 takes four ninths of the energy of 180', () => {
    // Derived, checks section 6.
    expect(energy([120]) / energy([180])).toBeCloseTo(4 / 9, 12);
  });
  it('is a mean over time: twice the window, root half the field', () => {
    expect(b1RmsMicroTesla([hard(90)], 1000) / b1RmsMicroTesla([hard(90)], 2000)).toBeCloseTo(
      Math.SQRT2,
      12,
    );
  });
  it('from 1.5 to 3 T the same pulses count four times', () => {
    expect(relativeEnergy(3, 2, 60) / relativeEnergy(1.5, 2, 60)).toBeCloseTo(4, 12);
  });
});
