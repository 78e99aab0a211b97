import { z } from 'zod';
import { bases, breathings, families, planes, weightings } from '../../sequences/index.js';

const positive = z.number().positive();
const nonNegative = z.number().nonnegative();
const count = z.number().int().positive();
const angle = z.number().gt(0).lte(180);

const pulse = z.strictObject({
  durationMs: positive,
  shapeFactor: z.number().min(1),
});

/** Everything a sequence says that may differ between fields, all optional: a sequence and its `at` parts add up. */
export const sequencePart = z.strictObject({
  dimensions: z.union([z.literal(2), z.literal(3)]).optional(),
  repetitionTimeMs: positive.optional(),
  flipAngleDeg: angle.optional(),
  echoTimeMs: positive.optional(),
  echoSpacingMs: positive.optional(),
  rfEchoTrainLength: count.max(1024).optional(),
  refocusingFlipAnglesDeg: z.union([angle.transform((a) => [a]), z.array(angle).min(1)]).optional(),
  inversionTimeMs: positive.optional(),
  kSpaceOrder: z.enum(['linear', 'centric', 'single-shot']).optional(),
  partialFourier: z.number().gt(0.5).lte(1).optional(),
  parallelReductionFactorInPlane: z.number().min(1).max(8).optional(),
  referenceLines: z.number().int().nonnegative().optional(),
  geometryFactor: z.number().min(1).optional(),
  matrixFrequency: count.max(4096).optional(),
  matrixPhase: count.max(4096).optional(),
  fovFrequencyMm: positive.max(600).optional(),
  fovPhaseMm: positive.max(600).optional(),
  oversamplingPhase: nonNegative.max(3).optional(),
  slices: count.max(1000).optional(),
  sliceThicknessMm: positive.max(200).optional(),
  sliceGapMm: nonNegative.max(100).optional(),
  averages: z.number().positive().max(64).optional(),
  fatSuppression: z.enum(['none', 'spectral', 'inversion']).optional(),
  fatResidual: z.number().min(0).max(1).optional(),
  readoutMs: positive.optional(),
  excitationPulse: pulse.optional(),
  refocusingPulse: pulse.optional(),
  inversionPulse: pulse.optional(),
  overheadMs: nonNegative.optional(),
  startUpRepeats: nonNegative.optional(),
  coolingGapMs: nonNegative.optional(),
  breathing: z.enum(breathings as [string, ...string[]]).optional(),
  bValuesSPerMm2: z.array(nonNegative).optional(),
  diffusionDirections: count.optional(),
  phases: count.optional(),
  phaseIntervalS: nonNegative.optional(),
  contrast: z.enum(['none', 'before', 'after']).optional(),
  earliestAfterInjectionS: nonNegative.optional(),
  latestAfterInjectionS: nonNegative.optional(),
});

export const sequenceEntry = sequencePart.extend({
  id: z.string().regex(/^[a-z0-9-]+$/, 'small letters, figures and hyphens only'),
  name: z.string().min(3),
  family: z.enum(families as [string, ...string[]]),
  weighting: z.enum(weightings as [string, ...string[]]),
  plane: z.enum(planes as [string, ...string[]]),
  basis: z.enum(bases as [string, ...string[]]),
  source: z.string().min(3),
  /** What differs per field; a sequence exists only at the fields named here. */
  at: z
    .strictObject({ '1.5': sequencePart.optional(), '3': sequencePart.optional() })
    .refine((at) => at['1.5'] !== undefined || at['3'] !== undefined, {
      message: 'name at least one field, "1.5" or "3" (an empty {} is enough)',
    }),
});

export const sequenceFile = z.strictObject({
  /** Room for YAML anchors that entries merge; not read by itself. */
  shared: z.unknown().optional(),
  sequences: z.array(z.unknown()).min(1),
});

export type SequenceEntry = z.infer<typeof sequenceEntry>;
