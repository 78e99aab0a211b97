import type { FieldT, KSpaceOrder } from '../physics/index.js';

/** Kind of acquisition. The first three are computed in full; the rest as far as published equations carry. */
export type Family =
  | 'spin-echo'
  | 'fast-spin-echo'
  | 'single-shot'
  | 'radial-fast-spin-echo'
  | 'gradient-echo'
  | 'diffusion-epi';

export const families: readonly Family[] = [
  'spin-echo',
  'fast-spin-echo',
  'single-shot',
  'radial-fast-spin-echo',
  'gradient-echo',
  'diffusion-epi',
];

/** Families in words that fit into a sentence: "a single-shot image". */
export const familyWords: Readonly<Record<Family, string>> = {
  'spin-echo': 'a spin-echo image',
  'fast-spin-echo': 'a fast spin-echo image',
  'single-shot': 'a single-shot image',
  'radial-fast-spin-echo': 'a rotating-blade fast spin-echo image',
  'gradient-echo': 'a gradient-echo image',
  'diffusion-epi': 'a diffusion image',
};

/** Contrast mechanism. A view asks for one; a sequence has one. */
export type Weighting =
  | 'T1'
  | 'T2'
  | 'PD'
  | 'FLAIR'
  | 'STIR'
  | 'diffusion'
  | 'susceptibility'
  | 'in-opposed-phase'
  | 'inflow'
  | 'bright-fluid';

export const weightings: readonly Weighting[] = [
  'T1',
  'T2',
  'PD',
  'FLAIR',
  'STIR',
  'diffusion',
  'susceptibility',
  'in-opposed-phase',
  'inflow',
  'bright-fluid',
];

export type Plane = 'axial' | 'sagittal' | 'coronal' | 'oblique' | 'slab';
export const planes: readonly Plane[] = ['axial', 'sagittal', 'coronal', 'oblique', 'slab'];

/** How breathing is dealt with; `none` where it does not move what is imaged. */
export type Breathing = 'none' | 'free' | 'held' | 'triggered';
export const breathings: readonly Breathing[] = ['none', 'free', 'held', 'triggered'];

export type Basis = 'published' | 'common practice' | 'assumption' | 'own records';
export const bases: readonly Basis[] = [
  'published',
  'common practice',
  'assumption',
  'own records',
];

/** One radio-frequency pulse's shape: duration in ms; mean-square over squared-mean of its envelope (1: hard pulse). */
export interface PulseShape {
  readonly durationMs: number;
  readonly shapeFactor: number;
}

/**
 * One acquisition with all its parameters, at one field. Parameter names follow the DICOM attributes
 * they carry (Repetition Time, RF Echo Train Length, Partial Fourier, Parallel Reduction Factor
 * In-plane, ...), with the unit at the end.
 */
export interface Sequence {
  readonly id: string;
  readonly name: string;
  readonly family: Family;
  readonly weighting: Weighting;
  readonly plane: Plane;
  readonly fieldT: FieldT;
  /** Number of encoded dimensions. 3: `slices` are partitions, encoded. */
  readonly dimensions: 2 | 3;
  /** Between excitations of one slice. Single-shot: the shortest interval between slices. */
  readonly repetitionTimeMs: number;
  /** Excitation flip angle, degrees. */
  readonly flipAngleDeg: number;
  /** Spin echo, gradient echo, diffusion: Echo Time. Echo trains: the effective echo time wanted (the reached one is computed). */
  readonly echoTimeMs: number;
  /** Between echoes of the train (also of an echo-planar train). Spin echo: unused, equals the echo time. */
  readonly echoSpacingMs: number;
  /** Echoes read per excitation; 1 for spin and gradient echo; computed for single-shot. */
  readonly rfEchoTrainLength: number;
  /** Refocusing flip angles; the last is repeated to the end of the train. */
  readonly refocusingFlipAnglesDeg: readonly number[];
  readonly inversionTimeMs?: number;
  readonly kSpaceOrder: KSpaceOrder;
  /** Fraction of phase lines acquired, above 0.5 and at most 1. */
  readonly partialFourier: number;
  readonly parallelReductionFactorInPlane: number;
  /** Fully sampled centre lines acquired in the train for parallel imaging. */
  readonly referenceLines: number;
  /** Noise amplification of parallel imaging (Pruessmann 1999), 1 or more. */
  readonly geometryFactor: number;
  readonly matrixFrequency: number;
  readonly matrixPhase: number;
  readonly fovFrequencyMm: number;
  readonly fovPhaseMm: number;
  /** Extra phase field of view acquired and thrown away, as a fraction (0.5: half as much again). */
  readonly oversamplingPhase: number;
  readonly slices: number;
  readonly sliceThicknessMm: number;
  readonly sliceGapMm: number;
  readonly averages: number;
  readonly fatSuppression: 'none' | 'spectral' | 'inversion';
  /** Fat signal left by spectral suppression, fraction. */
  readonly fatResidual: number;
  /** Sampling time of one echo, ms; its inverse is the bandwidth per pixel in kHz. */
  readonly readoutMs: number;
  readonly excitationPulse: PulseShape;
  readonly refocusingPulse: PulseShape;
  readonly inversionPulse: PulseShape;
  /** Excitation, spoiling and preparation time around one train, ms. */
  readonly overheadMs: number;
  /** Repeats run before data are kept. */
  readonly startUpRepeats: number;
  /** Rest between single-shot slices that keeps the RF exposure down, ms. */
  readonly coolingGapMs: number;
  readonly breathing: Breathing;
  /** Diffusion: weightings acquired, s/mm2, the highest is the one read; images per non-zero b-value. */
  readonly bValuesSPerMm2: readonly number[];
  readonly diffusionDirections: number;
  /** Timed phases acquired one after another (dynamic contrast series); 1 otherwise. */
  readonly phases: number;
  /** From the start of one timed phase to the next, s; 0: back to back. */
  readonly phaseIntervalS: number;
  readonly contrast: 'none' | 'before' | 'after';
  /** After the injection ends: earliest and latest start, s, where the phase is timed. */
  readonly earliestAfterInjectionS?: number;
  readonly latestAfterInjectionS?: number;
  readonly basis: Basis;
  /** Where the values come from, or why they were chosen. */
  readonly source: string;
}

/** Acquired pixel and slice sizes, mm. Pixel area as accreditation programmes define it: FOV over steps, both directions. */
export function voxelOf(sequence: Sequence): {
  readonly phaseMm: number;
  readonly frequencyMm: number;
  readonly sliceMm: number;
  readonly pixelAreaMm2: number;
  readonly volumeMm3: number;
} {
  const phaseMm = sequence.fovPhaseMm / sequence.matrixPhase;
  const frequencyMm = sequence.fovFrequencyMm / sequence.matrixFrequency;
  const sliceMm = sequence.sliceThicknessMm;
  const pixelAreaMm2 = phaseMm * frequencyMm;
  return { phaseMm, frequencyMm, sliceMm, pixelAreaMm2, volumeMm3: pixelAreaMm2 * sliceMm };
}

/** Whether echoes of an RF-refocused train fill k-space. */
export function hasEchoTrain(sequence: Sequence): boolean {
  return (
    sequence.family === 'fast-spin-echo' ||
    sequence.family === 'single-shot' ||
    sequence.family === 'radial-fast-spin-echo'
  );
}
