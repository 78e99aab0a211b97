import { z } from 'zod';
import { bases, families, planes, weightings } from '../../sequences/index.js';

const id = z.string().regex(/^[a-z0-9-]+$/, 'small letters, figures and hyphens only');
const text = z.string().min(2);

const target = z.strictObject({
  kind: z.enum(['lesion', 'border']),
  tissue: text,
  background: text,
  sizeMm: z.number().positive().max(200),
});

const limits = z.strictObject({
  sliceThicknessMm: z.number().positive().optional(),
  sliceGapMm: z.number().nonnegative().optional(),
  pixelAreaMm2: z.number().positive().optional(),
  pixelPhaseMm: z.number().positive().optional(),
  pixelFrequencyMm: z.number().positive().optional(),
  notAccepted: z
    .array(
      z.strictObject({
        family: z.enum(families as [string, ...string[]]),
        dimensions: z.union([z.literal(2), z.literal(3)]).optional(),
        source: text,
      }),
    )
    .optional(),
  source: text,
});

const view = z.strictObject({
  id,
  name: text,
  plane: z.enum(planes as [string, ...string[]]),
  weightings: z.array(z.enum(weightings as [string, ...string[]])).min(1),
  contrast: z.enum(['none', 'before', 'after']).default('none'),
  reference: id,
  candidates: z.array(id).min(1),
  requires: id.optional(),
  limits: limits.optional(),
});

const question = z.strictObject({
  id,
  name: text,
  asks: text,
  weight: z.number().int().min(1).max(9),
  target: target.optional(),
  needs: z
    .array(
      z.union([id, z.strictObject({ view: id, target: z.union([target, z.null()]).optional() })]),
    )
    .min(1),
  notExcluded: text,
});

/** One exam as it stands in its text file. `target` of a question holds for each needed view that names none of its own; null: none. */
export const examFile = z.strictObject({
  exam: id,
  name: text,
  region: text,
  coil: text,
  contrast: z.enum(['never', 'for some questions']),
  extraSetUpS: z.number().nonnegative().default(0),
  basis: z.enum(bases as [string, ...string[]]),
  source: text,
  questions: z.array(question).min(1),
  views: z.array(view).min(1),
});

export type ExamFile = z.infer<typeof examFile>;
