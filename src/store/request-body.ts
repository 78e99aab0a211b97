import { z } from 'zod';
import { patientClasses, statementSources } from '../exams/index.js';
import {
  contrastStates,
  dayParts,
  priorities,
  screeningStates,
  transports,
  type ExamRequest,
} from '../planning/index.js';
import { conditions, type ToleranceStatement } from '../tolerance/index.js';
import { StoreFault } from './fault.js';

const span = z.union([
  z.strictObject({ kind: z.literal('stated'), seconds: z.number() }),
  z.strictObject({ kind: z.literal('not asked') }),
]);

const tolerance = z.strictObject({
  still: span,
  hold: span,
  stay: span,
  saidBy: z.enum(statementSources),
  followsInstructions: z.enum(['yes', 'no', 'not asked']),
  conditions: z.array(z.enum(conditions)),
  patientClass: z.enum(patientClasses),
  ageYears: z.number().exactOptional(),
});

/** An exam request as it is kept. Strict both ways: nothing about a patient gets in that has no field here. */
const requestBody = z.strictObject({
  id: z.string().min(1),
  examId: z.string(),
  questionIds: z.array(z.string()),
  priority: z.enum(priorities),
  dueDate: z.string().exactOptional(),
  canCome: z.strictObject({
    from: z.string().exactOptional(),
    until: z.string().exactOptional(),
    partOfDay: z.enum(dayParts),
  }),
  tolerance,
  contrast: z.enum(contrastStates),
  safetyScreening: z.enum(screeningStates),
  transport: z.enum(transports),
  escort: z.boolean(),
  slotS: z.number(),
  b1RmsLimitMicroTesla: z.number().exactOptional(),
  note: z.string().exactOptional(),
});

// A field added to the types and forgotten here does not compile.
requestBody.shape satisfies Record<keyof ExamRequest, z.ZodType>;
requestBody.shape.canCome.shape satisfies Record<keyof ExamRequest['canCome'], z.ZodType>;
tolerance.shape satisfies Record<keyof ToleranceStatement, z.ZodType>;

/** The text to keep of a request. */
export const writeBody = (body: ExamRequest): string => JSON.stringify(checked(body, body.id));

/** The request that was kept. */
export const readBody = (text: string, id: string): ExamRequest => checked(JSON.parse(text), id);

/** Throws with the fields' names and never with their values. */
function checked(value: unknown, id: string): ExamRequest {
  const read = requestBody.safeParse(value);
  if (read.success && read.data.id === id) return read.data;
  const fields = read.success ? ['id'] : read.error.issues.map((issue) => issue.path.join('.'));
  throw new StoreFault('request-body', `fields ${[...new Set(fields)].join(', ')}`);
}
