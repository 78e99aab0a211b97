import { ProblemError } from '../shared/index.js';
import { emptyGrid, pixelCentres, type ComplexGrid } from './fourier.js';
import type { KSpacePlan } from './kspace.js';
import { addEllipse, movedRegion, noSignal, type Phantom, type Region } from './phantom.js';
import { reconstruct, reconstructionWeights } from './reconstruct.js';

/** One slice's acquisition, as far as its image needs it. */
export interface PreviewScan {
  readonly plan: KSpacePlan;
  /** Direction of the phase-encode axis in the phantom. */
  readonly phaseAlong: 'x' | 'y';
  /** Field of view of all the plan's lines, oversampling included, and of all frequency samples, mm. */
  readonly fovPhaseMm: number;
  readonly fovFrequencyMm: number;
  readonly frequencySamples: number;
  readonly echoSpacingMs: number;
  /** From shot to shot, ms. */
  readonly repetitionTimeMs: number;
  /** Whole images, one after the other, averaged. */
  readonly averages: number;
  /** Signal of each echo per tissue, proton density included. */
  readonly echoesOf: ReadonlyMap<string, Float64Array>;
  /** Standard deviation of the image's noise in the unit of the signals; 0: none. */
  readonly noise: number;
}

/** A rigid movement at one moment, counted from the first excitation; it stays moved. */
export interface Movement {
  readonly atMs: number;
  readonly shiftXMm: number;
  readonly shiftYMm: number;
  /** About the middle of the field of view, from x towards y. */
  readonly turnDeg: number;
}

/** The part shown, centred, and its pixels; finer than the acquired ones they are interpolated. */
export interface PreviewFrame {
  readonly columns: number;
  readonly rows: number;
  readonly widthMm: number;
  readonly heightMm: number;
}

/** Magnitude image, row after row from the top, in the unit of the signals. */
export interface PreviewImage {
  readonly columns: number;
  readonly rows: number;
  readonly values: Float64Array;
}

/**
 * Image of a phantom by a scan: exact spectra of its ellipses, each phase line weighted by the echo it
 * was read at and read in the position of that moment, noise, and the reconstruction that the scan
 * calls for. Lines that parallel imaging skips are taken as unfolded without fault, in the state of the
 * neighbour read. Not modelled: decay within an echo, through-plane movement, its effect on magnetisation.
 *
 * @param random uniform in [0, 1); needed where the scan has noise
 * @throws ProblemError for a tissue of the phantom without echoes, or noise without a random function
 */
export function previewImage(
  phantom: Phantom,
  scan: PreviewScan,
  frame: PreviewFrame,
  options: { readonly movement?: Movement; readonly random?: () => number } = {},
): PreviewImage {
  const data = acquire(phantom, scan, options.movement);
  if (scan.noise > 0) addNoise(data, scan, options.random);
  const x = pixelCentres(frame.columns, frame.widthMm);
  const y = pixelCentres(frame.rows, frame.heightMm);
  const alongX = scan.phaseAlong === 'x';
  const image = reconstruct(
    data,
    scan.plan.conjugateFilled,
    { fovMm: scan.fovPhaseMm, positionsMm: alongX ? x : y },
    { fovMm: scan.fovFrequencyMm, positionsMm: alongX ? y : x },
  );
  const { columns, rows } = frame;
  if (!alongX) return { columns, rows, values: image.values };
  const values = new Float64Array(columns * rows);
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      values[row * columns + column] = image.values[column * rows + row]!;
    }
  }
  return { columns, rows, values };
}

/** Part of a line's averages that were read before the movement, 0..1. */
export function stillShare(scan: PreviewScan, line: number, atMs: number): number {
  const { plan, averages, repetitionTimeMs, echoSpacingMs } = scan;
  const inImage =
    (plan.shotOfLine[line] ?? 0) * repetitionTimeMs +
    ((plan.echoOfLine[line] ?? 0) + 1) * echoSpacingMs;
  const imageMs = plan.shots * repetitionTimeMs;
  let before = 0;
  for (let n = 0; n < averages; n++) if (n * imageMs + inImage <= atMs) before += 1;
  return before / averages;
}

/** k-space of the lines that are read, normalised so that its plain sum over all samples is the image. */
function acquire(phantom: Phantom, scan: PreviewScan, movement?: Movement): ComplexGrid {
  const { plan, fovPhaseMm, fovFrequencyMm, frequencySamples } = scan;
  const data = emptyGrid(plan.phaseLines, frequencySamples);
  const echoes = phantom.regions.map((r) => [echoesFor(r.tissue, scan), echoesFor(r.over, scan)]);
  const moved = movement && phantom.regions.map((r) => movedRegion(r, movement));
  const alongX = scan.phaseAlong === 'x';
  const area = fovPhaseMm * fovFrequencyMm;
  for (let line = plan.conjugateFilled; line < plan.phaseLines; line++) {
    const kPhase = (line - Math.floor(plan.phaseLines / 2)) / fovPhaseMm;
    const kFrequency = -Math.floor(frequencySamples / 2) / fovFrequencyMm;
    const from = line * frequencySamples;
    const row = {
      kx: alongX ? kPhase : kFrequency,
      ky: alongX ? kFrequency : kPhase,
      stepX: alongX ? 0 : 1 / fovFrequencyMm,
      stepY: alongX ? 1 / fovFrequencyMm : 0,
      real: data.real.subarray(from, from + frequencySamples),
      imaginary: data.imaginary.subarray(from, from + frequencySamples),
    };
    const echo = plan.echoOfLine[line] ?? 0;
    const still = movement === undefined ? 1 : stillShare(scan, line, movement.atMs);
    const add = (regions: readonly Region[] | undefined, share: number) =>
      regions?.forEach((region, n) => {
        const step = (echoes[n]?.[0]?.[echo] ?? 0) - (echoes[n]?.[1]?.[echo] ?? 0);
        if (step !== 0 && share > 0) addEllipse(region, (share * step) / area, row);
      });
    add(phantom.regions, still);
    add(moved, 1 - still);
  }
  return data;
}

function echoesFor(tissue: string, scan: PreviewScan): Float64Array | undefined {
  if (tissue === noSignal) return undefined;
  const echoes = scan.echoesOf.get(tissue);
  if (echoes !== undefined && echoes.length > Math.max(...scan.plan.echoOfLine)) return echoes;
  throw new ProblemError({
    code: 'preview-without-echoes',
    thing: `tissue "${tissue}" of the phantom`,
    value: echoes === undefined ? 'no echoes given' : `${echoes.length} echoes given`,
    limit: `one signal for each of the ${scan.plan.echoTrainLength} echoes of the train`,
    wayOut: 'Compute the echoes of every tissue of the phantom.',
  });
}

/** Complex Gaussian noise (Box and Muller 1958) on every sample read, sized for the image that comes of it. */
function addNoise(data: ComplexGrid, scan: PreviewScan, random?: () => number): void {
  if (random === undefined) {
    throw new ProblemError({
      code: 'preview-without-random',
      thing: 'noise of the preview',
      value: 'no random function',
      limit: 'noise above 0 needs one',
      wayOut: 'Give a random function, or noise 0.',
    });
  }
  const missing = scan.plan.conjugateFilled;
  const weights = reconstructionWeights(data.rows, missing);
  const power = weights.reduce((sum, w) => sum + w * w, 0) * data.columns;
  const each = scan.noise / Math.sqrt(power);
  for (let n = missing * data.columns; n < data.real.length; n++) {
    const radius = each * Math.sqrt(-2 * Math.log(1 - random()));
    const angle = 2 * Math.PI * random();
    data.real[n] = data.real[n]! + radius * Math.cos(angle);
    data.imaginary[n] = data.imaginary[n]! + radius * Math.sin(angle);
  }
}
