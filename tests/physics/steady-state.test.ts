import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { steadyStateEchoes, type Repeat } from '../../src/physics/index.js';
import { ProblemError } from '../../src/shared/index.js';
import { randomTrain } from '../oracles/bloch-trains.js';
import { blochSteadyState } from '../oracles/bloch.js';

const constant = (deg: number, count: number) => Array.from({ length: count }, () => deg);

describe('steady state over repeats', () => {
  it('agrees with isochromats run repeat after repeat, with and without any inversion', () => {
    fc.assert(
      fc.property(
        randomTrain,
        fc.double({ min: 1, max: 8, noNaN: true }),
        fc.option(
          fc.record({
            inversionTimeMs: fc.double({ min: 50, max: 2500, noNaN: true }),
            flipDeg: fc.double({ min: 90, max: 200, noNaN: true }),
          }),
          { nil: undefined },
        ),
        (train, factor, inversion) => {
          const needMs =
            train.refocusingDeg.length * train.echoSpacingMs + (inversion?.inversionTimeMs ?? 0);
          const repeat = {
            repetitionTimeMs: Math.max(needMs * factor, train.t1Ms / 10),
            ...(inversion === undefined ? {} : { inversion }),
          };
          const reference = blochSteadyState(train, repeat);
          const { echoes, startMz } = steadyStateEchoes(train, repeat);
          expect(startMz).toBeCloseTo(reference.startMz, 9);
          echoes.forEach((e, n) => expect(e).toBeCloseTo(reference.echoes[n] ?? NaN, 9));
        },
      ),
      { numRuns: 60, seed: 4 },
    );
  });

  it('of a long train counts what grows back during it', () => {
    const train = {
      t1Ms: 340,
      t2Ms: 60,
      echoSpacingMs: 5,
      refocusingDeg: constant(110, 120),
      excitationDeg: 90,
      b1Scale: 0.9,
    };
    const repeat = { repetitionTimeMs: 650 };
    const { startMz } = steadyStateEchoes(train, repeat);
    expect(startMz).toBeCloseTo(blochSteadyState(train, repeat).startMz, 9);
  });

  it('of one perfect echo is the exact spin-echo formula', () => {
    // PD (1 - 2 exp(-(TR - TE/2)/T1) + exp(-TR/T1)) exp(-TE/T2), checks section 7; recovery after the echo is
    // counted from the echo, so TE/2 past the 180.
    const { echoes } = steadyStateEchoes(
      { t1Ms: 833, t2Ms: 83, echoSpacingMs: 15, refocusingDeg: [180] },
      { repetitionTimeMs: 500 },
    );
    expect((echoes[0] ?? 0) * 0.86).toBeCloseTo(0.3168, 4);
  });

  it('needs one repeat when nothing is left over, more when the repeat is short', () => {
    const train = { t1Ms: 800, t2Ms: 80, echoSpacingMs: 10, refocusingDeg: constant(120, 8) };
    const long = steadyStateEchoes(train, { repetitionTimeMs: 60_000 });
    const short = steadyStateEchoes({ ...train, excitationDeg: 60 }, { repetitionTimeMs: 300 });
    expect(long.repeats).toBe(1);
    expect(long.startMz).toBeCloseTo(1, 9);
    expect(short.repeats).toBeGreaterThan(2);
  });

  it('refuses a train that does not fit, naming both times', () => {
    const run = () =>
      steadyStateEchoes(
        { t1Ms: 800, t2Ms: 80, echoSpacingMs: 10, refocusingDeg: constant(180, 50) },
        { repetitionTimeMs: 400 },
      );
    expect(run).toThrow(ProblemError);
    expect(run).toThrow(/400 ms; the train takes 500 ms/);
  });

  it('takes a train that fills the repeat exactly', () => {
    const train = { t1Ms: 800, t2Ms: 80, echoSpacingMs: 9.4, refocusingDeg: constant(180, 17) };
    expect(() => steadyStateEchoes(train, { repetitionTimeMs: 17 * 9.4 })).not.toThrow();
  });

  it.each<[Repeat, string]>([
    [{ repetitionTimeMs: NaN }, 'Repetition Time'],
    [{ repetitionTimeMs: 500, inversion: { inversionTimeMs: -100 } }, 'Inversion Time'],
    [
      { repetitionTimeMs: 500, inversion: { inversionTimeMs: 100, flipDeg: NaN } },
      'inversion flip',
    ],
  ])('refuses %j by name', (repeat, name) => {
    const train = { t1Ms: 800, t2Ms: 80, echoSpacingMs: 10, refocusingDeg: [180] };
    expect(() => steadyStateEchoes(train, repeat)).toThrow(ProblemError);
    expect(() => steadyStateEchoes(train, repeat)).toThrow(name);
  });
});
