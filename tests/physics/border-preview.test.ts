import { describe, expect, it } from 'vitest';
import {
  borderWidthMm,
  echoAmplitudes,
  lineWeights,
  noSignal,
  planKSpace,
  previewImage,
  tissueAt,
  type KSpaceRequest,
  type Phantom,
} from '../../src/physics/index.js';

/** A wide lake of fluid in white matter: its edge is as good as straight. */
const lake: Phantom = {
  name: 'lake',
  regions: [
    {
      tissue: 'white matter',
      over: noSignal,
      xMm: 0,
      yMm: 0,
      halfXMm: 100,
      halfYMm: 100,
      turnDeg: 0,
    },
    { tissue: 'csf', over: 'white matter', xMm: 0, yMm: 0, halfXMm: 50, halfYMm: 50, turnDeg: 0 },
  ],
};

const pixelMm = 1;
const lines = 255;

function widths(request: Partial<KSpaceRequest>) {
  const plan = planKSpace({
    phaseLines: lines,
    partialFourier: 1,
    parallelFactor: 1,
    referenceLines: 0,
    echoTrainLength: 17,
    order: 'linear',
    echoSpacingMs: 10,
    ...request,
  });
  const echoesOf = new Map(
    (['csf', 'white matter'] as const).map((name) => {
      const { t1Ms, t2Ms, protonDensity } = tissueAt(name, 3);
      const refocusingDeg = new Array<number>(plan.echoTrainLength).fill(150);
      const echoSpacingMs = request.echoSpacingMs ?? 10;
      const echoes = echoAmplitudes({ t1Ms, t2Ms, echoSpacingMs, refocusingDeg });
      return [name, echoes.map((e) => e * protonDensity)] as const;
    }),
  );
  const scan = {
    plan,
    phaseAlong: 'x' as const,
    fovPhaseMm: lines * pixelMm,
    fovFrequencyMm: 255,
    frequencySamples: 255,
    echoSpacingMs: 10,
    repetitionTimeMs: 5000,
    averages: 1,
    echoesOf,
    noise: 0,
  };
  // One row through the middle, 0.02 mm fine, from inside the lake to outside.
  const columns = 6000;
  const { values } = previewImage(lake, scan, { columns, rows: 1, widthMm: 120, heightMm: 0.1 });
  const weights = (name: 'csf' | 'white matter') =>
    lineWeights(plan, echoesOf.get(name) ?? new Float64Array());
  const [a, b] = [weights('csf'), weights('white matter')];
  const centre = Math.floor(lines / 2);
  const share = (x: number) => {
    const value = values[Math.round((x / 120 + 0.5) * columns - 0.5)] ?? NaN;
    return (value - (b[centre] ?? NaN)) / ((a[centre] ?? NaN) - (b[centre] ?? NaN));
  };
  let inner = 50;
  let outer = 50;
  if (share(50) < 0.9) while (share(inner) < 0.9) inner -= 0.02;
  else while (share(inner) >= 0.9) inner += 0.02;
  if (share(50) > 0.1) while (share(outer) > 0.1) outer += 0.02;
  else while (share(outer) <= 0.1) outer -= 0.02;
  return { drawn: outer - inner, computed: borderWidthMm(a, b, pixelMm) };
}

describe('the border in the picture is the border computed', () => {
  // The picture knows nothing of point spreads: exact spectra, echo by echo, reconstruction. 5 % for the lake's roundness.
  it.each<[string, Partial<KSpaceRequest>]>([
    ['multi-shot linear', {}],
    ['multi-shot linear, late echo', { wantedEffectiveEchoTimeMs: 130 }],
    ['centric', { order: 'centric' }],
    ['single-shot', { order: 'single-shot', echoSpacingMs: 4 }],
    ['single-shot half-Fourier', { order: 'single-shot', partialFourier: 0.56, echoSpacingMs: 4 }],
  ])('%s', (_, request) => {
    const { drawn, computed } = widths(request);
    expect(drawn / computed).toBeGreaterThan(0.95);
    expect(drawn / computed).toBeLessThan(1.05);
  });
});
