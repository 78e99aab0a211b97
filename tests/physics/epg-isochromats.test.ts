import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { echoAmplitudes } from '../../src/physics/index.js';
import { blochTrain } from '../oracles/bloch.js';
import { randomTrain } from '../oracles/bloch-trains.js';

describe('any train agrees with brute-force Bloch isochromats', () => {
  it('echo amplitudes, any angles and B1 scale', () => {
    fc.assert(
      fc.property(randomTrain, (train) => {
        // Isochromats carry what regrows too: it never reaches an echo, in either model.
        const reference = blochTrain(train, 1).echoes;
        echoAmplitudes(train).forEach((e, n) => expect(e).toBeCloseTo(reference[n] ?? NaN, 10));
      }),
      { numRuns: 400, seed: 3 },
    );
  });

  it('a train of 256 echoes, where dropping states would tell', () => {
    const train = {
      t1Ms: 4300,
      t2Ms: 1900,
      echoSpacingMs: 4,
      refocusingDeg: Array.from({ length: 256 }, (_, n) => 60 + 50 * Math.sin(n * n)),
      excitationDeg: 80,
      b1Scale: 1.1,
    };
    const reference = blochTrain(train, 1).echoes;
    echoAmplitudes(train).forEach((e, n) => expect(e).toBeCloseTo(reference[n] ?? NaN, 10));
  });
});
