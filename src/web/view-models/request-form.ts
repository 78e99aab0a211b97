import {
  patientClasses,
  statementSources,
  type Exam,
  type SiteLibrary,
} from '../../exams/index.js';
import { readRow, type BookedRequest } from '../../interchange/index.js';
import {
  contrastStates,
  dayParts,
  priorities,
  screeningStates,
  transports,
  type ExamRequest,
} from '../../planning/index.js';
import type { Problem, Result } from '../../shared/index.js';
import { conditions, type SpanStatement } from '../../tolerance/index.js';

/** A form as it came: every field as text, lists joined. */
export type FormValues = Readonly<Record<string, string>>;

/** Quick answers as a clerk hears them on the phone; "other" opens a field. */
export const quickAnswers = {
  still_for: ['not asked', '20 s', '1 min', '2 min', '5 min', '10 min', '20 min', '40 min'],
  hold_breath_for: ['not asked', 'none', '6 s', '10 s', '15 s', '20 s'],
  stay_for: ['not asked', '10 min', '20 min', '30 min', '45 min', '60 min'],
  slot: ['15 min', '20 min', '30 min', '45 min', '60 min'],
} as const;

/** Everything the form offers, with what is chosen. */
export interface RequestForm {
  readonly values: FormValues;
  readonly exams: readonly { readonly id: string; readonly name: string }[];
  readonly exam?: Exam;
  readonly chosenQuestions: readonly string[];
  readonly chosenConditions: readonly string[];
  readonly quick: typeof quickAnswers;
  readonly lists: {
    readonly priorities: readonly string[];
    readonly classes: readonly string[];
    readonly sources: readonly string[];
    readonly conditions: readonly string[];
    readonly contrast: readonly string[];
    readonly screening: readonly string[];
    readonly transports: readonly string[];
    readonly dayParts: readonly string[];
  };
  readonly problems: readonly Problem[];
}

export function requestForm(
  values: FormValues,
  library: SiteLibrary,
  problems: readonly Problem[] = [],
): RequestForm {
  const exam = library.exams.get(values['exam'] ?? '');
  const list = (name: string) => (values[name] ?? '').split(';').filter((v) => v !== '');
  return {
    values,
    exams: [...library.exams.values()].map(({ id, name }) => ({ id, name })),
    ...(exam === undefined ? {} : { exam }),
    chosenQuestions: list('questions'),
    chosenConditions: list('conditions'),
    quick: quickAnswers,
    lists: {
      priorities,
      classes: patientClasses,
      sources: statementSources,
      conditions,
      contrast: contrastStates,
      screening: screeningStates,
      transports,
      dayParts,
    },
    problems: inFormWords(problems),
  };
}

/** Form fields as they are posted, turned into one text per field: lists joined, "other" replaced by what was written. */
export function formValues(body: Readonly<Record<string, unknown>>): FormValues {
  const values: Record<string, string> = {};
  for (const [name, value] of Object.entries(body)) {
    if (name.endsWith('_other')) continue;
    const text = Array.isArray(value) ? value.map(String).join(';') : String(value ?? '');
    values[name] = text === 'other' ? String(body[`${name}_other`] ?? '') : text;
  }
  return values;
}

/** A request from the form; the same reader as for lists, so the same rules. */
export function readForm(values: FormValues): Result<BookedRequest> {
  const { scanner, start, ...rest } = values;
  return readRow(rest, 'the form');
}

/** What the form calls its fields. */
const fieldLabels: Readonly<Record<string, string>> = {
  request_id: 'Request number',
  exam: 'Exam',
  questions: 'What does the referrer ask?',
  still_for: 'How long can you lie flat and still?',
  hold_breath_for: 'How long can you hold your breath?',
  stay_for: 'How long can you bear it in the scanner?',
  follows_instructions: 'Can you follow instructions?',
  said_by: 'Who says so?',
  age_years: 'Age',
  slot: 'Slot',
  priority: 'Priority',
  due_date: 'Answer due by',
  can_come_from: 'Can come from',
  can_come_until: 'Can come until',
  can_come_part: 'Can come in the',
  conditions: 'Anything that makes it hard',
  contrast: 'Contrast medium',
  safety_screening: 'Safety screening',
  transport: 'Comes',
  patient_class: 'Patient',
  escort: 'Escort',
  b1rms_limit_microtesla: 'B1+rms limit',
};

const chooseExam = { limit: 'every request names its exam', wayOut: 'Choose one from the list.' };

/** Problems in the form's own words instead of the column names of a list. */
export function inFormWords(problems: readonly Problem[]): readonly Problem[] {
  return problems.map((problem) => {
    const field = /field ([a-z0-9_]+)$/.exec(problem.thing)?.[1] ?? '';
    const label = fieldLabels[field];
    if (label === undefined) return problem;
    return {
      ...problem,
      thing: label,
      ...(field === 'exam' && problem.value === 'missing' ? chooseExam : {}),
    };
  });
}

/** A stored request as form values again, for changing it. */
export function valuesOf(request: ExamRequest): FormValues {
  const { tolerance, canCome } = request;
  return {
    request_id: request.id,
    exam: request.examId,
    questions: request.questionIds.join(';'),
    priority: request.priority,
    due_date: request.dueDate ?? '',
    can_come_from: canCome.from ?? '',
    can_come_until: canCome.until ?? '',
    can_come_part: canCome.partOfDay,
    patient_class: tolerance.patientClass,
    age_years: tolerance.ageYears === undefined ? '' : String(tolerance.ageYears),
    still_for: spanText(tolerance.still),
    hold_breath_for: spanText(tolerance.hold),
    stay_for: spanText(tolerance.stay),
    said_by: tolerance.saidBy,
    follows_instructions: tolerance.followsInstructions,
    conditions: tolerance.conditions.join(';'),
    contrast: request.contrast,
    safety_screening: request.safetyScreening,
    transport: request.transport,
    escort: request.escort ? 'yes' : 'no',
    slot: `${Math.round(request.slotS / 60)} min`,
    b1rms_limit_microtesla:
      request.b1RmsLimitMicroTesla === undefined ? '' : String(request.b1RmsLimitMicroTesla),
    note: request.note ?? '',
  };
}

function spanText(span: SpanStatement): string {
  if (span.kind === 'not asked') return 'not asked';
  if (span.seconds === 0) return 'none';
  return span.seconds % 60 === 0 ? `${span.seconds / 60} min` : `${span.seconds} s`;
}
