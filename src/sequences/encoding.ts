import { planKSpace, type KSpacePlan } from '../physics/index.js';
import { hasEchoTrain, type Sequence } from './sequence.js';

/** Lines to encode along the phase direction: the phase matrix with its oversampling, whole lines. */
export function phaseLinesOf(sequence: Sequence): number {
  return Math.round(sequence.matrixPhase * (1 + sequence.oversamplingPhase));
}

/**
 * Which echo fills which line. Spin and gradient echo read one line per excitation, which is a train
 * of one; an echo-planar image is one train. Rotating blades have no single plan: see `radial-weights`.
 */
export function encodingOf(sequence: Sequence): KSpacePlan {
  const single = !hasEchoTrain(sequence) && sequence.family !== 'diffusion-epi';
  const oneTrain = sequence.family === 'single-shot' || sequence.family === 'diffusion-epi';
  return planKSpace({
    phaseLines: phaseLinesOf(sequence),
    partialFourier: sequence.partialFourier,
    parallelFactor: sequence.parallelReductionFactorInPlane,
    referenceLines: sequence.parallelReductionFactorInPlane > 1 ? sequence.referenceLines : 0,
    echoTrainLength: single ? 1 : sequence.rfEchoTrainLength,
    order: oneTrain ? 'single-shot' : single ? 'linear' : sequence.kSpaceOrder,
    echoSpacingMs: single ? sequence.echoTimeMs : sequence.echoSpacingMs,
    wantedEffectiveEchoTimeMs: sequence.echoTimeMs,
  });
}

/** Blades that cover a disc of k-space: ceil(pi/2 x lines across / lines per blade) (Pipe 1999). */
export function bladesOf(sequence: Sequence): number {
  return Math.ceil(((Math.PI / 2) * phaseLinesOf(sequence)) / sequence.rfEchoTrainLength);
}

/** Excitations needed for one slice (or one slab) and one average. */
export function shotsOf(sequence: Sequence): number {
  if (sequence.family === 'radial-fast-spin-echo') return bladesOf(sequence);
  if (sequence.family === 'diffusion-epi' || sequence.family === 'single-shot') {
    return sequence.dimensions === 3 ? sequence.slices : 1;
  }
  const plan = encodingOf(sequence);
  if (sequence.dimensions === 2) return plan.shots;
  const perTrain = hasEchoTrain(sequence) ? sequence.rfEchoTrainLength : 1;
  return Math.ceil((plan.acquiredLines * sequence.slices) / perTrain);
}

/** Echoes actually read after one excitation. */
export function trainLengthOf(sequence: Sequence): number {
  if (sequence.family === 'single-shot' || sequence.family === 'diffusion-epi') {
    return encodingOf(sequence).echoTrainLength;
  }
  return hasEchoTrain(sequence) ? sequence.rfEchoTrainLength : 1;
}

/** From the excitation to the end of the last readout, ms. */
export function trainDurationMs(sequence: Sequence): number {
  switch (sequence.family) {
    case 'spin-echo':
    case 'gradient-echo':
      return sequence.echoTimeMs + sequence.readoutMs / 2;
    case 'diffusion-epi':
      return sequence.echoTimeMs + (trainLengthOf(sequence) * sequence.echoSpacingMs) / 2;
    default:
      return trainLengthOf(sequence) * sequence.echoSpacingMs + sequence.readoutMs / 2;
  }
}
