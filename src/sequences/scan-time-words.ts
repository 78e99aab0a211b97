import { bladesOf, encodingOf, phaseLinesOf } from './encoding.js';
import type { ImpossibleScan, WorkingLine } from './scan-time-types.js';
import { hasEchoTrain, type Sequence } from './sequence.js';

/** A sequence that cannot run, with what it needs, what there is, and the way out. */
export const impossible = (sequence: Sequence, value: string, limit: string, wayOut: string) =>
  ({
    kind: 'impossible',
    problem: {
      code: 'sequence-cannot-run',
      thing: `sequence "${sequence.id}" at ${sequence.fieldT} T`,
      value,
      limit,
      wayOut,
    },
  }) as const satisfies ImpossibleScan;

/** How many lines (or blades) one slice needs, worked out. */
export function encodingLines(sequence: Sequence): WorkingLine[] {
  if (sequence.family === 'radial-fast-spin-echo') {
    return [
      {
        what: 'blades',
        how: `ceil(pi/2 x ${phaseLinesOf(sequence)} / ${sequence.rfEchoTrainLength})`,
        value: `${bladesOf(sequence)}`,
      },
    ];
  }
  const plan = encodingOf(sequence);
  const parts = [`${sequence.matrixPhase} steps`];
  if (sequence.oversamplingPhase > 0) parts.push(`oversampling ${1 + sequence.oversamplingPhase}`);
  if (sequence.partialFourier < 1) parts.push(`partial Fourier ${round(sequence.partialFourier)}`);
  if (sequence.parallelReductionFactorInPlane > 1) {
    parts.push(
      `/ ${sequence.parallelReductionFactorInPlane} in parallel with ${sequence.referenceLines} reference lines`,
    );
  }
  return [{ what: 'lines', how: parts.join(', '), value: `${plan.acquiredLines}` }];
}

/** How excitations per slice come about, in words. */
export function shotsHow(sequence: Sequence): string {
  if (sequence.family === 'diffusion-epi') return 'one excitation per image';
  if (!hasEchoTrain(sequence)) return 'one line per excitation';
  return `lines / echo train length ${sequence.rfEchoTrainLength}, rounded up`;
}

/** Held work that does not fit the patient's breath. */
export function tooLongToHold(
  sequence: Sequence,
  needS: number,
  holdSpanS: number,
): ImpossibleScan {
  return impossible(
    sequence,
    `the shortest breath-hold it can be split into is ${round(needS)} s`,
    holdSpanS > 0
      ? `this patient holds ${round(holdSpanS)} s`
      : 'this patient cannot hold the breath on command',
    'Use a triggered or single-shot version.',
  );
}

/** A figure short enough to read. */
export const round = (x: number) =>
  Math.abs(x) >= 100 ? x.toFixed(0) : Number(x.toFixed(2)).toString();
