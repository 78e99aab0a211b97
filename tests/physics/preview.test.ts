import { describe, expect, it } from 'vitest';
import {
  addEllipse,
  headPhantom,
  movedRegion,
  noSignal,
  phantomTissues,
  planKSpace,
  previewImage,
  stillShare,
  type KSpaceRequest,
  type Phantom,
  type PreviewFrame,
  type PreviewImage,
  type PreviewScan,
} from '../../src/physics/index.js';
import { ProblemError } from '../../src/shared/index.js';

const bright: Readonly<Record<string, number>> = {
  fat: 0.9,
  csf: 1,
  'grey matter': 0.5,
  'white matter': 0.4,
  catheter: 0,
  'oedema-like lesion': 0.7,
  'acute infarct': 0.45,
};

/** A train whose echoes are all alike: every tissue keeps its plain signal. */
function idealScan(request: Partial<KSpaceRequest>, given: Partial<PreviewScan> = {}): PreviewScan {
  const plan = planKSpace({
    phaseLines: 129,
    partialFourier: 1,
    parallelFactor: 1,
    referenceLines: 0,
    echoTrainLength: 16,
    order: 'linear',
    echoSpacingMs: 10,
    ...request,
  });
  return {
    plan,
    phaseAlong: 'x',
    fovPhaseMm: 220,
    fovFrequencyMm: 220,
    frequencySamples: 128,
    echoSpacingMs: 10,
    repetitionTimeMs: 4000,
    averages: 1,
    echoesOf: new Map(
      phantomTissues(headPhantom).map((t) => [
        t,
        new Float64Array(plan.echoTrainLength).fill(bright[t] ?? NaN),
      ]),
    ),
    noise: 0,
    ...given,
  };
}

const frame: PreviewFrame = { columns: 128, rows: 128, widthMm: 220, heightMm: 220 };
const singleShot = { order: 'single-shot', partialFourier: 0.6 } as const;

/** Mean over a disc of pixels, and their scatter. */
function disc(image: PreviewImage, xMm: number, yMm: number, radiusMm: number) {
  const found: number[] = [];
  for (let row = 0; row < image.rows; row++) {
    for (let column = 0; column < image.columns; column++) {
      const x = ((column + 0.5) / image.columns - 0.5) * frame.widthMm;
      const y = ((row + 0.5) / image.rows - 0.5) * frame.heightMm;
      if (Math.hypot(x - xMm, y - yMm) <= radiusMm)
        found.push(image.values[row * image.columns + column]!);
    }
  }
  const mean = found.reduce((a, b) => a + b, 0) / found.length;
  const variance = found.reduce((a, b) => a + (b - mean) ** 2, 0) / found.length;
  return { mean, deviation: Math.sqrt(variance) };
}

const furthest = (a: PreviewImage, b: PreviewImage) =>
  a.values.reduce((most, v, n) => Math.max(most, Math.abs(v - b.values[n]!)), 0);

/** Park and Miller's generator (1988), multiplier 16807: enough for a test. */
function random(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 16807) % 2147483647;
    return state / 2147483647;
  };
}

describe('an ideal train without noise', () => {
  const image = previewImage(headPhantom, idealScan({}), frame);
  it.each([
    ['csf', -11, -4, 4],
    ['white matter', 0, 55, 10],
    ['oedema-like lesion', 33, 38, 4],
    ['grey matter', 28, 2, 4],
    ['acute infarct', -47, 4, 3],
  ] as const)('shows %s at its own signal', (tissue, x, y, radius) => {
    // Truncation ringing is left: 2 % of the brightest.
    expect(Math.abs(disc(image, x, y, radius).mean - (bright[tissue] ?? NaN))).toBeLessThan(0.02);
  });
  it('shows nothing outside the head', () => {
    expect(disc(image, 98, 98, 10).mean).toBeLessThan(0.01);
  });
  it('holds nearly all the energy of the plain picture, and never more', () => {
    // Parseval for the picture, Bessel's inequality for the samples kept of it. Exact areas of the ellipses.
    const level = (t: string) => (t === noSignal ? 0 : (bright[t] ?? NaN));
    const energy = headPhantom.regions.reduce(
      (sum, r) =>
        sum + (level(r.tissue) ** 2 - level(r.over) ** 2) * Math.PI * r.halfXMm * r.halfYMm,
      0,
    );
    const every = { columns: 129, rows: 129, widthMm: 220, heightMm: 220 };
    const { values } = previewImage(headPhantom, idealScan({}, { frequencySamples: 129 }), every);
    const kept = values.reduce((sum, v) => sum + v * v, 0) / values.length;
    expect(kept / (energy / 220 ** 2)).toBeLessThan(1);
    expect(kept / (energy / 220 ** 2)).toBeGreaterThan(0.95);
  });
  it('is the same with the phase axis the other way', () => {
    const turned = previewImage(
      headPhantom,
      idealScan({}, { phaseAlong: 'y', frequencySamples: 129 }),
      frame,
    );
    const straight = previewImage(headPhantom, idealScan({}, { frequencySamples: 129 }), frame);
    expect(furthest(turned, straight)).toBeLessThan(1e-9);
  });
  it('does not change with what is shown of it', () => {
    const part = previewImage(headPhantom, idealScan({}), {
      columns: 64,
      rows: 64,
      widthMm: 110,
      heightMm: 110,
    });
    expect(part.values[32 * 64 + 32]).toBeCloseTo(image.values[64 * 128 + 64]!, 12);
  });
});

describe('half-Fourier', () => {
  it('equals full-Fourier for a real phantom without decay', () => {
    // Odd numbers both ways: every sample has its mirror, so the two must agree to rounding.
    const odd = { frequencySamples: 129 };
    const full = previewImage(headPhantom, idealScan({}, odd), frame);
    const half = previewImage(headPhantom, idealScan(singleShot, odd), frame);
    expect(furthest(full, half)).toBeLessThan(1e-9);
  });
  it('of an even number of lines differs by no more than the one line without a mirror holds', () => {
    // Triangle inequality on the line at -N/2, which full-Fourier reads and half-Fourier cannot fill.
    const odd = { frequencySamples: 129 };
    const full = previewImage(headPhantom, idealScan({ phaseLines: 128 }, odd), frame);
    const half = previewImage(
      headPhantom,
      idealScan({ ...singleShot, phaseLines: 128 }, odd),
      frame,
    );
    const row = {
      kx: -64 / 220,
      ky: -64 / 220,
      stepX: 0,
      stepY: 1 / 220,
      real: new Float64Array(129),
      imaginary: new Float64Array(129),
    };
    for (const r of headPhantom.regions)
      addEllipse(r, ((bright[r.tissue] ?? 0) - (bright[r.over] ?? 0)) / 220 ** 2, row);
    const held = row.real.reduce((sum, a, n) => sum + Math.hypot(a, row.imaginary[n]!), 0);
    expect(furthest(full, half)).toBeGreaterThan(0);
    expect(furthest(full, half)).toBeLessThan(held);
  });
});

describe('noise', () => {
  it.each([
    ['all lines', {}],
    ['half-Fourier', singleShot],
  ] as const)('comes out at the level asked for: %s', (_, request) => {
    // Bright and even: magnitude noise is then plain Gaussian. 5 % for the sample of a few hundred pixels.
    const quiet = previewImage(headPhantom, idealScan(request), frame);
    const noisy = previewImage(headPhantom, idealScan(request, { noise: 0.02 }), frame, {
      random: random(7),
    });
    const difference = { ...noisy, values: noisy.values.map((v, n) => v - quiet.values[n]!) };
    const { mean, deviation } = disc(difference, 0, 50, 22);
    expect(Math.abs(mean)).toBeLessThan(0.003);
    expect(deviation / 0.02).toBeGreaterThan(0.9);
    expect(deviation / 0.02).toBeLessThan(1.1);
  });
  it('needs a random function', () => {
    const run = () => previewImage(headPhantom, idealScan({}, { noise: 0.1 }), frame);
    expect(run).toThrow(ProblemError);
  });
  it('is the same for the same random numbers', () => {
    const run = () =>
      previewImage(headPhantom, idealScan({}, { noise: 0.1 }), frame, { random: random(3) });
    expect(furthest(run(), run())).toBe(0);
  });
});

describe('movement', () => {
  const movement = { atMs: 0, shiftXMm: 6, shiftYMm: -3, turnDeg: 5 };
  const scan = idealScan({});
  const still = previewImage(headPhantom, scan, frame);

  it('before the first echo shows the moved head, unharmed', () => {
    const moved: Phantom = {
      ...headPhantom,
      regions: headPhantom.regions.map((r) => movedRegion(r, movement)),
    };
    expect(
      furthest(
        previewImage(moved, scan, frame),
        previewImage(headPhantom, scan, frame, { movement }),
      ),
    ).toBeLessThan(1e-12);
  });
  it('after the last echo changes nothing', () => {
    const after = { ...movement, atMs: scan.plan.shots * scan.repetitionTimeMs };
    expect(furthest(still, previewImage(headPhantom, scan, frame, { movement: after }))).toBe(0);
  });
  it('half way spoils a multi-shot image, ghosts outside the head included', () => {
    const during = { ...movement, atMs: (scan.plan.shots * scan.repetitionTimeMs) / 2 };
    const spoiled = previewImage(headPhantom, scan, frame, { movement: during });
    expect(disc(spoiled, 95, 0, 10).mean).toBeGreaterThan(5 * disc(still, 95, 0, 10).mean);
  });
  it('counts averages one after the other', () => {
    const twice = idealScan({}, { averages: 2 });
    const imageMs = twice.plan.shots * twice.repetitionTimeMs;
    expect(stillShare(twice, 64, imageMs)).toBe(0.5);
    expect(stillShare(twice, 64, 2 * imageMs)).toBe(1);
    expect(stillShare(twice, 64, 0)).toBe(0);
  });
});

describe('what cannot be drawn', () => {
  it('a tissue without echoes is refused by name', () => {
    const echoesOf = new Map(idealScan({}).echoesOf);
    echoesOf.delete('csf');
    expect(() => previewImage(headPhantom, idealScan({}, { echoesOf }), frame)).toThrow(/"csf"/);
  });
});
