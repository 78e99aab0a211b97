import { ProblemError } from '../shared/index.js';

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
  readonly conjugateFilled: number;
  readonly centreEcho: number;
  readonly effectiveEchoTimeMs: number;
  /** Echoes used per shot. */
  readonly echoTrainLength: number;
}

/**
 * Which echo fills which line. Linear: segmented, each echo one band of k-space, shifted so that the
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
  const rankOfCentre = acquired.indexOf(centre);
  const echoAt = new Map<number, number>();
  acquired.forEach((line, rank) => {
    echoAt.set(line, echoFor(rank, rankOfCentre, count, shots, train, request));
  });
  const echoOfLine = new Int32Array(lines);
  let conjugateFilled = 0;
  for (let line = 0; line < lines; line++) {
    let from = line;
    if (line < firstLine) {
      conjugateFilled += 1;
      from = Math.min(lines - 1, 2 * centre - line);
    }
    echoOfLine[line] = echoAt.get(nearest(acquired, from)) ?? 0;
  }
  const centreEcho = echoOfLine[centre] ?? 0;
  return {
    phaseLines: lines,
    acquiredLines: count,
    shots,
    echoOfLine,
    conjugateFilled,
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

function echoFor(
  rank: number,
  rankOfCentre: number,
  count: number,
  shots: number,
  train: number,
  request: KSpaceRequest,
): number {
  if (request.order === 'single-shot') return rank;
  if (request.order === 'centric') {
    const distance = Math.abs(rank - rankOfCentre);
    const place = rank === rankOfCentre ? 0 : 2 * distance - (rank > rankOfCentre ? 1 : 0);
    return Math.min(train - 1, Math.floor(place / shots));
  }
  const wanted =
    request.wantedEffectiveEchoTimeMs === undefined
      ? Math.floor(rankOfCentre / shots)
      : Math.round(request.wantedEffectiveEchoTimeMs / request.echoSpacingMs) - 1;
  const atCentre = Math.max(0, Math.min(train - 1, wanted));
  // Bands of `shots` lines, the centre line in the middle of its band, wrapped around the edge of k-space.
  const shift = atCentre * shots + Math.floor(shots / 2) - rankOfCentre;
  const place = (((rank + shift) % count) + count) % count;
  return Math.min(train - 1, Math.floor(place / shots));
}

function nearest(sorted: readonly number[], line: number): number {
  let low = 0;
  let high = sorted.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if ((sorted[middle] ?? 0) <= line) low = middle;
    else high = middle;
  }
  const a = sorted[low] ?? 0;
  const b = sorted[high] ?? a;
  return Math.abs(line - a) <= Math.abs(b - line) ? a : b;
}

function check(request: KSpaceRequest): void {
  const refuse = (thing: string, value: number, limit: string) => {
    throw new ProblemError({
      code: 'kspace-value',
      thing,
      value: String(value),
      limit,
      wayOut: 'Correct the sequence.',
    });
  };
  if (!Number.isInteger(request.phaseLines) || request.phaseLines < 4)
    refuse('phase lines', request.phaseLines, 'a whole number, 4 or more');
  if (!(request.partialFourier > 0.5 && request.partialFourier <= 1))
    refuse('Partial Fourier', request.partialFourier, 'above 0.5, at most 1');
  if (!(request.parallelFactor >= 1))
    refuse('Parallel Reduction Factor', request.parallelFactor, '1 or more');
  if (!Number.isInteger(request.echoTrainLength) || request.echoTrainLength < 1)
    refuse('RF Echo Train Length', request.echoTrainLength, 'a whole number, 1 or more');
  if (!(request.echoSpacingMs > 0)) refuse('echo spacing', request.echoSpacingMs, 'above 0 ms');
}
