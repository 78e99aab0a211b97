import {
  borderWidthMm,
  relativeNoise,
  spreadWidthMm,
  targetContrast,
  tissueAt,
  type FieldT,
} from '../physics/index.js';
import { bladesOf, encodingOf, phaseLinesOf } from './encoding.js';
import { lineSignal } from './line-weights.js';
import { hasEchoTrain, voxelOf, type Sequence } from './sequence.js';

/** What is looked for: a lesion of a size in a background, or the border between two tissues. */
export interface TargetSought {
  readonly kind: 'lesion' | 'border';
  readonly tissue: string;
  readonly background: string;
  readonly sizeMm: number;
}

/** What a sequence shows of a target. Signals are fractions of fully relaxed water; noise is in a fixed arbitrary unit. */
export interface ComputedAssessment {
  readonly kind: 'computed';
  readonly effectiveEchoTimeMs: number;
  /** Signal at the centre of k-space. */
  readonly signalTarget: number;
  readonly signalBackground: number;
  /** Full width at half maximum of the point spread along the phase direction, mm and acquired pixels. */
  readonly blurTargetMm: number;
  readonly blurBackgroundMm: number;
  readonly pixelPhaseMm: number;
  /** 10-90 % width of the edge between the two tissues, mm. */
  readonly borderWidthMm: number;
  /** Contrast after blur and partial volume (lesion) or plain (border). Signed. */
  readonly contrast: number;
  readonly noise: number;
  readonly contrastToNoise: number;
  readonly remarks: readonly string[];
}

export type Assessment =
  ComputedAssessment | { readonly kind: 'not computed'; readonly why: string };

/** Effective echo time reached, ms: the time of the echo on the centre line. */
export function effectiveEchoTimeMs(sequence: Sequence): number {
  if (sequence.family === 'radial-fast-spin-echo') {
    return ((sequence.rfEchoTrainLength + 1) / 2) * sequence.echoSpacingMs;
  }
  return hasEchoTrain(sequence) ? encodingOf(sequence).effectiveEchoTimeMs : sequence.echoTimeMs;
}

/** Noise of the image in a fixed arbitrary unit (Edelstein 1986, Macovski 1996; parallel imaging Pruessmann 1999). */
export function noiseOf(sequence: Sequence): number {
  const radial = sequence.family === 'radial-fast-spin-echo';
  return relativeNoise({
    voxelMm3: voxelOf(sequence).volumeMm3,
    acquiredLines: radial
      ? bladesOf(sequence) * sequence.rfEchoTrainLength
      : encodingOf(sequence).acquiredLines,
    averages:
      sequence.averages * (sequence.family === 'diffusion-epi' ? sequence.diffusionDirections : 1),
    readoutMs: sequence.readoutMs,
    fieldT: sequence.fieldT,
    parallelFactor: sequence.parallelReductionFactorInPlane,
    geometryFactor: sequence.geometryFactor,
    partialFourierFraction: sequence.partialFourier,
    ...(sequence.dimensions === 3 ? { partitions: sequence.slices } : {}),
  });
}

/**
 * Holds a sequence against a target: signals, blur, border, contrast and noise at the sequence's field.
 * @throws ProblemError for a tissue that is unknown or has no value at the field.
 */
export function assess(sequence: Sequence, target: TargetSought): Assessment {
  const at: FieldT = sequence.fieldT;
  const signalOfTarget = lineSignal(sequence, tissueAt(target.tissue, at));
  if (signalOfTarget.kind === 'not computed') return signalOfTarget;
  const signalOfBackground = lineSignal(sequence, tissueAt(target.background, at));
  if (signalOfBackground.kind === 'not computed') return signalOfBackground;

  const inside = signalOfTarget.weights;
  const outside = signalOfBackground.weights;
  const voxel = voxelOf(sequence);
  const centre = Math.floor(phaseLinesOf(sequence) / 2);
  const signalTarget = inside[centre] ?? 0;
  const signalBackground = outside[centre] ?? 0;
  const contrast =
    target.kind === 'border'
      ? signalTarget - signalBackground
      : targetContrast(inside, outside, {
          diameterMm: target.sizeMm,
          pixelPhaseMm: voxel.phaseMm,
          pixelFrequencyMm: voxel.frequencyMm,
          sliceThicknessMm: voxel.sliceMm,
        });
  const noise = noiseOf(sequence);
  return {
    kind: 'computed',
    effectiveEchoTimeMs: effectiveEchoTimeMs(sequence),
    signalTarget,
    signalBackground,
    blurTargetMm: widthOf(inside, voxel.phaseMm),
    blurBackgroundMm: widthOf(outside, voxel.phaseMm),
    pixelPhaseMm: voxel.phaseMm,
    borderWidthMm: borderWidthMm(inside, outside, voxel.phaseMm),
    contrast,
    noise,
    contrastToNoise: Math.abs(contrast) / noise,
    remarks: signalOfTarget.remarks,
  };
}

/** No signal has no spread: the plain pixel's is given. */
const widthOf = (weights: Float64Array, pixelMm: number) =>
  weights.some((w) => w !== 0) ? spreadWidthMm(weights, pixelMm) : pixelMm;
