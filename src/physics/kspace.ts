import { ProblemError } from '../shared/index.js';
import { placesInTrain } from './kspace-order.js';

export type KSpaceOrder = 'linear' | 'centric' | 'single-shot';

export interface KSpaceRequest {
  /** Lines of the full matrix, oversampling included. */
  readonly phaseLines: number;
  /** Above 0.5, at most 1. */
  readonly partialFourier: number;
  readonly parallelFactor: number;
  /** Fully sampled centre lines, acquired in addition to the skipped pattern. */
  readonly referenceLines: number;
  readonly echoTrainLength: number;
  readonly order: KSpaceOrder;
  readonly echoSpacingMs: number;
  /** The nearest reachable is used; ignored for centric and single-shot. */
  readonly wantedEffectiveEchoTimeMs?: number;
}

export interface KSpacePlan {
  readonly phaseLines: number;
  /** Lines acquired, reference lines included. */
  readonly acquiredLines: number;
  readonly shots: number;
  /**
   * Echo (from 0) at which each line was read; the centre is line floor(phaseLines / 2). Lines that
   * parallel imaging skips take their neighbour's echo, conjugate-filled ones their mirror's.
   */
  readonly echoOfLine: Int32Array;
  /** Shot (from 0) in which each line was read, by the same rule. */
  readonly shotOfLine: Int32Array;
  /** Lines filled by conjugate symmetry: the first ones, 0 to this number less one. */
  readonly conjugateFilled: number;
  readonly centreEcho: number;
  readonly effectiveEchoTimeMs: number;
  /** Echoes used per shot. */
  readonly echoTrainLength: number;
}

/**
 * Which echo fills which line. Linear: segmented, each echo one band of k-space, turned so that the
 * wanted effective echo time lands on the centre. Centric: first echo at the centre, outwards on both
 * sides. Single-shot: one train from the overscan side through the centre to the far edge; with partial
 * Fourier the rest is filled by conjugate symmetry (Margosian 1986; Noll 1991). The effective echo time is
 * that of the echo on the centre line.
 *
 * @throws ProblemError for lines, fractions or factors that cannot be
 */
export function planKSpace(request: KSpaceRequest): KSpacePlan {
  check(request);
  const lines = request.phaseLines;
  const centre = Math.floor(lines / 2);
  const measured = Math.min(lines, Math.round(request.partialFourier * lines));
  const firstLine = lines - measured;
  const acquired: number[] = [];
  const referenceFrom = centre - Math.floor(request.referenceLines / 2);
  for (let line = firstLine; line < lines; line++) {
    const onPattern = isOnPattern(line - centre, request.parallelFactor);
    const isReference = line >= referenceFrom && line < referenceFrom + request.referenceLines;
    if (onPattern || isReference) acquired.push(line);
  }
  const count = acquired.length;
  const single = request.order === 'single-shot';
  const shots = single ? 1 : Math.ceil(count / request.echoTrainLength);
  const train = single ? count : Math.min(request.echoTrainLength, count);
  const wantedEcho =
    request.wantedEffectiveEchoTimeMs === undefined
      ? undefined
      : Math.round(request.wantedEffectiveEchoTimeMs / request.echoSpacingMs) - 1;
  const places = placesInTrain(request.order, count, acquired.indexOf(centre), train, wantedEcho);
  const echoOfLine = new Int32Array(lines);
  const shotOfLine = new Int32Array(lines);
  for (let line = 0; line < lines; line++) {
    const from = line < firstLine ? Math.min(lines - 1, 2 * centre - line) : line;
    const place = places[rankOfNearest(acquired, from)];
    echoOfLine[line] = place?.echo ?? -1;
    shotOfLine[line] = place?.shot ?? -1;
  }
  const centreEcho = echoOfLine[centre] ?? 0;
  return {
    phaseLines: lines,
    acquiredLines: count,
    shots,
    echoOfLine,
    shotOfLine,
    conjugateFilled: firstLine,
    centreEcho,
    effectiveEchoTimeMs: (centreEcho + 1) * request.echoSpacingMs,
    echoTrainLength: train,
  };
}

/**
 * Weight of every line: the amplitude of the echo it was read at. Where one side is filled by conjugate
 * symmetry, the lines that were read on both sides are merged with a ramp across the centre, as
 * homodyne reconstruction of a phase-corrected image does (Noll 1991): the weights come out symmetric.
 */
export function lineWeights(plan: KSpacePlan, echoes: Float64Array): Float64Array {
  const weights = Float64Array.from(plan.echoOfLine, (echo) => echoes[echo] ?? 0);
  if (plan.conjugateFilled === 0) return weights;
  const centre = Math.floor(plan.phaseLines / 2);
  const overscan = centre - plan.conjugateFilled;
  for (let k = 1; k <= overscan; k++) {
    const ramp = k / (overscan + 1);
    const near = weights[centre - k] ?? 0;
    const far = weights[centre + k] ?? near;
    const merged = ((1 + ramp) * far + (1 - ramp) * near) / 2;
    weights[centre - k] = merged;
    if (centre + k < weights.length) weights[centre + k] = merged;
  }
  return weights;
}

/** Every R-th line counted from the centre; for a fractional factor the nearest line to each multiple. */
function isOnPattern(offset: number, factor: number): boolean {
  if (factor === 1) return true;
  return Math.round(Math.round(offset / factor) * factor) === offset;
}

/** Index of the acquired line nearest to a line; the lower of two equally near. */
function rankOfNearest(sorted: readonly number[], line: number): number {
  let low = 0;
  let high = sorted.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if ((sorted[middle] ?? 0) <= line) low = middle;
    else high = middle;
  }
  const a = sorted[low] ?? 0;
  const b = sorted[high] ?? a;
  return Math.abs(line - a) <= Math.abs(b - line) ? low : high;
}

function check(request: KSpaceRequest): void {
  const refuse = (thing: string, value: number, limit: string, wayOut: string): never => {
    throw new ProblemError({ code: 'kspace-value', thing, value: String(value), limit, wayOut });
  };
  const { phaseLines, partialFourier, parallelFactor, referenceLines, echoTrainLength } = request;
  const wanted = request.wantedEffectiveEchoTimeMs ?? request.echoSpacingMs;
  if (!Number.isInteger(phaseLines) || phaseLines < 4)
    refuse('phase lines', phaseLines, 'a whole number, 4 or more', 'Give the whole phase matrix.');
  if (!(partialFourier > 0.5 && partialFourier <= 1))
    refuse('Partial Fourier', partialFourier, 'above 0.5, at most 1', 'Use 1 for all lines.');
  if (!(parallelFactor >= 1 && parallelFactor <= phaseLines / 2))
    refuse(
      'Parallel Reduction Factor',
      parallelFactor,
      '1 or more, at most half the phase lines',
      'Use 1 without parallel imaging.',
    );
  if (!Number.isInteger(referenceLines) || referenceLines < 0 || referenceLines > phaseLines)
    refuse(
      'reference lines',
      referenceLines,
      'a whole number from 0 to the phase lines',
      'Use 0 without parallel imaging.',
    );
  if (!Number.isInteger(echoTrainLength) || echoTrainLength < 1)
    refuse(
      'RF Echo Train Length',
      echoTrainLength,
      'a whole number, 1 or more',
      'Use 1 for one line per excitation.',
    );
  if (!(request.echoSpacingMs > 0 && request.echoSpacingMs < Infinity))
    refuse('echo spacing', request.echoSpacingMs, 'above 0 ms', 'Give it in ms.');
  if (!(wanted > 0 && wanted < Infinity))
    refuse('wanted echo time', wanted, 'above 0 ms', 'Give it in ms, or leave it out.');
}
