import { describe, expect, it } from 'vitest';
import {
  echoAmplitudes,
  lineWeights,
  planKSpace,
  spreadWidthMm,
  tissueAt,
} from '../../src/physics/index.js';

const lines = 2048;
const u = (i: number) => (i - lines / 2) / lines;
const linear = (tau: number) =>
  Float64Array.from({ length: lines }, (_, i) => Math.exp(-tau * (u(i) + 0.5)));
const centric = (tau: number) =>
  Float64Array.from({ length: lines }, (_, i) => Math.exp(-2 * tau * Math.abs(u(i))));

describe('point spread of a decaying train', () => {
  // Table of the checks, section 4 (derived by quadrature, printed to four places). Many lines stand in for the
  // continuum of the table.
  const taus = [0.25, 0.5, 1, 1.5, 2, 3, 4, 6, 8, 10, 12.8];
  const linearPx = [
    1.2096, 1.2183, 1.2537, 1.3148, 1.4053, 1.7026, 2.2179, 3.3247, 4.4121, 5.5136, 7.0571,
  ];
  const centricPx = [
    1.2518, 1.301, 1.4129, 1.5449, 1.6996, 2.0862, 2.5843, 3.8174, 5.0966, 6.3666, 8.1487,
  ];
  const peak = [0.8848, 0.7869, 0.6321, 0.5179, 0.4323, 0.3167, 0.2454, 0.1663, 0.125, 0.1, 0.0781];

  it.each(taus.map((tau, n) => [tau, linearPx[n] ?? 0] as const))(
    'linear, tau %d: %d pixels',
    (tau, px) => {
      expect(Math.abs(spreadWidthMm(linear(tau), 1) - px)).toBeLessThan(2e-3);
    },
  );
  it.each(taus.map((tau, n) => [tau, centricPx[n] ?? 0] as const))(
    'centric or conjugate-filled, tau %d: %d pixels',
    (tau, px) => {
      expect(Math.abs(spreadWidthMm(centric(tau), 1) - px)).toBeLessThan(2e-3);
    },
  );
  it.each(taus.map((tau, n) => [tau, peak[n] ?? 0] as const))(
    'peak at tau %d is %d, (1 - e^-tau)/tau',
    (tau, value) => {
      const mean = centric(tau).reduce((a, b) => a + b, 0) / lines;
      expect(mean).toBeCloseTo(value, 3);
      expect(value).toBeCloseTo((1 - Math.exp(-tau)) / tau, 3);
    },
  );

  it('no decay gives the sinc width, 1.2067 pixels, in mm of the pixel', () => {
    expect(spreadWidthMm(new Float64Array(256).fill(0.3), 0.9)).toBeCloseTo(1.2067 * 0.9, 3);
  });

  it('signal-to-noise for the time spent is best at a train of 1.256 T2', () => {
    // Qin 2012 prints 1.2; derived: the peak (1 - e^-x)/x over noise 1/sqrt(x) is largest at the root of e^x = 1 + 2x.
    const value = (x: number) => (linear(x).reduce((sum, w) => sum + w, 0) / lines) * Math.sqrt(x);
    expect(value(1.25643)).toBeGreaterThan(value(1.23));
    expect(value(1.25643)).toBeGreaterThan(value(1.28));
    expect(Math.exp(1.25643)).toBeCloseTo(1 + 2 * 1.25643, 4);
  });

  it('side lobes above half do not count: the nearest half maximum does', () => {
    // Two lines alone give |cos|: half maximum at a third of the lobe, 2/3 of N/2d pixels wide (derived).
    const two = new Float64Array(256);
    two[128 - 40] = 1;
    two[128 + 40] = 1;
    expect(spreadWidthMm(two, 1)).toBeCloseTo((2 / 3) * (256 / 80), 6);
  });

  it('strong decay approaches the Lorentzian width 2 tau / pi', () => {
    // Closed form, checks section 4.
    expect(spreadWidthMm(centric(40), 1) / ((2 * 40) / Math.PI)).toBeCloseTo(1, 2);
  });
});

describe('trains of real tissues', () => {
  const halfFourier = (
    spacingMs: number,
    phaseLines: number,
    partialFourier: number,
    tissue: string,
    parallelFactor = 1,
  ) => {
    const plan = planKSpace({
      phaseLines,
      partialFourier,
      parallelFactor,
      referenceLines: 0,
      echoTrainLength: 999,
      order: 'single-shot',
      echoSpacingMs: spacingMs,
    });
    const { t1Ms, t2Ms } = tissueAt(tissue, 3);
    const echoes = echoAmplitudes({
      t1Ms,
      t2Ms,
      echoSpacingMs: spacingMs,
      refocusingDeg: new Array<number>(plan.echoTrainLength).fill(180),
    });
    return { plan, px: spreadWidthMm(lineWeights(plan, echoes), 1) };
  };

  it('half-Fourier, 256 lines, spacing 4: liver 9.59, white matter 4.10, grey matter 2.97, fluid 1.26 pixels', () => {
    // Derived, checks section 4, from centre to edge 512 ms. A few overscan lines read before the centre make the
    // conjugate-filled spread only nearly centric: 3 % is allowed for them.
    for (const [tissue, px] of [
      ['liver', 9.59],
      ['white matter', 4.1],
      ['grey matter', 2.97],
      ['csf', 1.26],
    ] as const) {
      const found = halfFourier(4, 256, 129 / 256, tissue).px;
      expect(found / px, tissue).toBeGreaterThan(0.97);
      expect(found / px, tissue).toBeLessThan(1.03);
    }
  });

  it('with parallel imaging by 2: 4.80, 2.18, 1.81, 1.23 pixels', () => {
    // Derived, checks section 4: half the lines, so half the time from centre to edge; no reference lines counted.
    for (const [tissue, px] of [
      ['liver', 4.8],
      ['white matter', 2.18],
      ['grey matter', 1.81],
      ['csf', 1.23],
    ] as const) {
      const found = halfFourier(4, 256, 129 / 256, tissue, 2).px;
      expect(found / px, tissue).toBeGreaterThan(0.97);
      expect(found / px, tissue).toBeLessThan(1.03);
    }
  });

  it('143 echoes spaced 4.2 ms at 3 T blur white matter to about 5 pixels and fluid to about 1.3', () => {
    // The design's orientation figures, from a throw-away script; recomputed here: 4.72 and 1.26.
    const white = halfFourier(4.2, 254, 143 / 254, 'white matter');
    expect(white.plan.echoTrainLength).toBe(143);
    expect(Math.round(white.px)).toBe(5);
    expect(halfFourier(4.2, 254, 143 / 254, 'csf').px).toBeCloseTo(1.3, 1);
  });

  it('multi-shot trains planned line by line: white matter 1.41 pixels for 16 echoes in one sweep, fluid 1.21', () => {
    // Derived, checks section 4, for a continuous decay; bands of equal echoes differ from it by less than 3 %.
    const plan = planKSpace({
      phaseLines: 256,
      partialFourier: 1,
      parallelFactor: 1,
      referenceLines: 0,
      echoTrainLength: 16,
      order: 'linear',
      echoSpacingMs: 10,
    });
    const px = (tissue: string) => {
      const { t1Ms, t2Ms } = tissueAt(tissue, 3);
      const refocusingDeg = new Array<number>(16).fill(180);
      const echoes = echoAmplitudes({ t1Ms, t2Ms, echoSpacingMs: 10, refocusingDeg });
      return spreadWidthMm(lineWeights(plan, echoes), 1);
    };
    expect(px('white matter') / 1.41).toBeGreaterThan(0.97);
    expect(px('white matter') / 1.41).toBeLessThan(1.03);
    expect(px('csf')).toBeCloseTo(1.21, 2);
  });

  it('a centre read late sharpens the main lobe below the sinc: edges are enhanced', () => {
    // Derived: lines further out are brighter than the centre. No published figure was seen.
    const weights = Float64Array.from({ length: 256 }, (_, i) =>
      Math.abs(i - 128) < 40 ? 0.4 : 1,
    );
    expect(spreadWidthMm(weights, 1)).toBeLessThan(1.2067);
  });

  it('multi-shot linear: white matter with trains of 16 spaced 10 is 1.41 pixels, of 8 is 1.25', () => {
    // Derived for the continuous decay, checks section 4: the train as one decay over the lines; bands of equal echoes
    // and the wrap of the effective echo time are left out by taking the lines in one sweep.
    const sweep = (trainMs: number, t2Ms: number) => spreadWidthMm(linear(trainMs / t2Ms), 1);
    expect(sweep(160, 79.6)).toBeCloseTo(1.41, 2);
    expect(sweep(80, 79.6)).toBeCloseTo(1.25, 2);
    expect(sweep(135, 34)).toBeCloseTo(2.2, 1);
  });
});
