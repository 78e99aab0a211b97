import { describe, expect, it } from 'vitest';
import {
  opposedPhaseEchoTimeMs,
  waterFatShiftHz,
  waterFatSignal,
} from '../../src/physics/index.js';

describe('water and fat in one voxel', () => {
  it('fat stands 217 Hz below water at 1.5 T and 434 Hz at 3 T', () => {
    // From memory: 3.4 parts per million.
    expect(waterFatShiftHz(1.5)).toBeCloseTo(217, 0);
    expect(waterFatShiftHz(3)).toBeCloseTo(434, 0);
  });
  it('first opposed near 2.3 ms at 1.5 T and 1.15 ms at 3 T', () => {
    // Common practice, no source.
    expect(opposedPhaseEchoTimeMs(1.5)).toBeCloseTo(2.3, 1);
    expect(opposedPhaseEchoTimeMs(3)).toBeCloseTo(1.15, 1);
  });
  it.each([0, 0.1, 0.2, 0.5, 0.8, 1])('a fat fraction of %d leaves |1 - 2 f| opposed', (f) => {
    // Dixon 1984: opposed water minus fat, in phase water plus fat.
    for (const fieldT of [1.5, 3] as const) {
      const opposed = opposedPhaseEchoTimeMs(fieldT);
      const at = (echoTimeMs: number) => waterFatSignal({ fatFraction: f, fieldT, echoTimeMs });
      expect(at(opposed)).toBeCloseTo(Math.abs(1 - 2 * f), 12);
      expect(at(2 * opposed)).toBeCloseTo(1, 12);
      expect(at(0)).toBe(1);
    }
  });
  it('decays with T2*', () => {
    const s = { fatFraction: 0.3, fieldT: 3, echoTimeMs: 2 * opposedPhaseEchoTimeMs(3) } as const;
    expect(waterFatSignal({ ...s, t2StarMs: 20 })).toBeCloseTo(Math.exp(-s.echoTimeMs / 20), 12);
  });
});
