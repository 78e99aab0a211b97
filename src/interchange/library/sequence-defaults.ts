import type { Sequence } from '../../sequences/index.js';

/** What a sequence file need not say. All are common practice, no source, and can be overridden per entry. */
export const sequenceDefaults = {
  dimensions: 2,
  flipAngleDeg: 90,
  rfEchoTrainLength: 1,
  refocusingFlipAnglesDeg: [150],
  kSpaceOrder: 'linear',
  partialFourier: 1,
  parallelReductionFactorInPlane: 1,
  geometryFactor: 1,
  oversamplingPhase: 0,
  sliceGapMm: 0,
  averages: 1,
  fatSuppression: 'none',
  fatResidual: 0.1,
  excitationPulse: { durationMs: 2.5, shapeFactor: 2 },
  refocusingPulse: { durationMs: 2, shapeFactor: 1.6 },
  inversionPulse: { durationMs: 8, shapeFactor: 2 },
  overheadMs: 12,
  startUpRepeats: 1,
  coolingGapMs: 0,
  breathing: 'none',
  bValuesSPerMm2: [],
  diffusionDirections: 1,
  phases: 1,
  phaseIntervalS: 0,
  contrast: 'none',
} satisfies Partial<Sequence>;

/** Reference lines acquired where parallel imaging is used and the file names none. */
export const defaultReferenceLines = 24;
