import { describe, expect, it } from 'vitest';
import {
  diffusionWeight,
  ernstAngleDeg,
  inversionNullMs,
  spinEchoSignal,
  spinEchoSignalExact,
  spoiledGradientEcho,
  steadyStateEchoes,
} from '../../src/physics/index.js';

/** Simulated brain database (McGill; Kwan 1999), 1.5 T: T1, T2, proton density. */
const simulated = {
  csf: [2569, 329, 1],
  gm: [833, 83, 0.86],
  wm: [500, 70, 0.77],
  fat: [350, 70, 1],
  muscle: [900, 47, 1],
  lesion: [752, 237, 0.76],
} as const;

describe('the echo time that tells two tissues best apart', () => {
  // ln(b/a) a b / (b - a) for TR >> T1 and equal proton density: derived, checks section 7.
  it.each([
    [79.6, 110, 93.17],
    [85, 133, 105.44],
    [34, 61, 44.9],
  ])('T2 %d against %d: %d ms', (a, b, best) => {
    const apart = (echoTimeMs: number) => {
      const s = { t1Ms: 1, protonDensity: 1, repetitionTimeMs: 1e6, echoTimeMs };
      return spinEchoSignal({ ...s, t2Ms: b }) - spinEchoSignal({ ...s, t2Ms: a });
    };
    expect((Math.log(b / a) * a * b) / (b - a)).toBeCloseTo(best, 2);
    expect(apart(best)).toBeGreaterThan(apart(best - 1));
    expect(apart(best)).toBeGreaterThan(apart(best + 1));
  });
});

describe('spin echo', () => {
  // Table of the checks, section 7: simple (exact) signal for the simulated-brain tissues.
  const rows: [number, number, Record<keyof typeof simulated, [number, number]>][] = [
    [
      500,
      15,
      {
        csf: [0.169, 0.1644],
        gm: [0.324, 0.3168],
        wm: [0.3929, 0.3859],
        fat: [0.6137, 0.6053],
        muscle: [0.3098, 0.3028],
        lesion: [0.3465, 0.3391],
      },
    ],
    [
      3000,
      15,
      {
        csf: [0.6582, 0.6565],
        gm: [0.6982, 0.6979],
        wm: [0.6199, 0.6199],
        fat: [0.807, 0.807],
        muscle: [0.7008, 0.7004],
        lesion: [0.7002, 0.6999],
      },
    ],
    [
      3000,
      100,
      {
        csf: [0.5084, 0.4993],
        gm: [0.2507, 0.2499],
        wm: [0.1841, 0.184],
        fat: [0.2396, 0.2396],
        muscle: [0.1149, 0.1144],
        lesion: [0.4892, 0.4879],
      },
    ],
  ];
  for (const [repetitionTimeMs, echoTimeMs, expected] of rows) {
    for (const name of Object.keys(expected) as (keyof typeof simulated)[]) {
      it(`TR ${repetitionTimeMs}, TE ${echoTimeMs}, ${name}`, () => {
        const [t1Ms, t2Ms, protonDensity] = simulated[name];
        const s = { t1Ms, t2Ms, protonDensity, repetitionTimeMs, echoTimeMs };
        const [simple, exact] = expected[name];
        expect(Math.abs(spinEchoSignal(s) - simple)).toBeLessThan(6e-5);
        expect(Math.abs(spinEchoSignalExact(s) - exact)).toBeLessThan(6e-5);
        // The phase graph with one perfect echo must be the exact form.
        const { echoes } = steadyStateEchoes(
          { t1Ms, t2Ms, echoSpacingMs: echoTimeMs, refocusingDeg: [180] },
          { repetitionTimeMs },
        );
        expect(protonDensity * (echoes[0] ?? 0)).toBeCloseTo(spinEchoSignalExact(s), 5);
      });
    }
  }
});

describe('inversion null', () => {
  // Checks, section 7: T1 4300 and 4000.
  it.each([
    [4300, 6000, 2028.8],
    [4300, 8000, 2358.7],
    [4300, 9000, 2480.5],
    [4300, 10000, 2579.6],
    [4000, 9500, 2416.8],
    [4000, 10000, 2457.0],
  ])('T1 %d at TR %d is nulled at %d ms', (t1, tr, ti) => {
    expect(Math.abs(inversionNullMs(t1, tr) - ti)).toBeLessThan(0.06);
  });
  it('is T1 ln 2 for an endless repeat, and counts the recovery from the last echo', () => {
    expect(inversionNullMs(4300)).toBeCloseTo(2980.5, 1);
    expect(Math.abs(inversionNullMs(4300, 9000, 200) - 2458.1)).toBeLessThan(0.06);
    // Fat, T1 ln 2: derived, checks section 7.
    expect(inversionNullMs(288)).toBeCloseTo(199.6, 1);
    expect(Math.abs(inversionNullMs(343) - 237.7)).toBeLessThan(0.06);
    expect(inversionNullMs(371)).toBeCloseTo(257.2, 1);
    expect(inversionNullMs(382)).toBeCloseTo(264.8, 1);
  });
  it('really nulls the steady-state train', () => {
    // A perfect-180 train of even length leaves no longitudinal magnetisation: recovery starts at its end.
    const train = {
      t1Ms: 4300,
      t2Ms: 1900,
      echoSpacingMs: 10,
      refocusingDeg: new Array<number>(20).fill(180),
    };
    const inversionTimeMs = inversionNullMs(4300, 9000, 200);
    const { echoes } = steadyStateEchoes(train, {
      repetitionTimeMs: 9000,
      inversion: { inversionTimeMs },
    });
    expect(Math.abs(echoes[0] ?? 1)).toBeLessThan(2e-3);
  });
});

describe('gradient echo and diffusion', () => {
  // Ernst angle and signal at it, checks section 7.
  it.each([
    [5, 1000, 5.725, 0.05],
    [10, 1000, 8.089, 0.07071],
    [100, 800, 28.055, 0.24984],
    [150, 812, 33.764, 0.30348],
    [500, 1084, 50.914, 0.47605],
  ])('TR %d, T1 %d: Ernst angle %d, signal %d', (repetitionTimeMs, t1Ms, deg, signal) => {
    const flipDeg = ernstAngleDeg(t1Ms, repetitionTimeMs);
    expect(Math.abs(flipDeg - deg)).toBeLessThan(6e-4);
    const s = { t1Ms, t2StarMs: 50, repetitionTimeMs, echoTimeMs: 0, protonDensity: 1 };
    expect(Math.abs(spoiledGradientEcho({ ...s, flipDeg }) - signal)).toBeLessThan(6e-6);
    expect(spoiledGradientEcho({ ...s, flipDeg: flipDeg + 3 })).toBeLessThan(signal);
    expect(spoiledGradientEcho({ ...s, flipDeg: flipDeg - 3 })).toBeLessThan(signal);
  });
  it('b 1000 in free fluid leaves a twentieth', () => {
    // exp(-1000 x 3e-3) (Stejskal and Tanner 1965); the coefficient of free water at body heat is from memory.
    expect(diffusionWeight(1000, 3e-3)).toBeCloseTo(0.0498, 4);
  });
});
