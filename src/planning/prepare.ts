import type { ClinicalQuestion, Exam, SiteLibrary } from '../exams/index.js';
import type { ScannerAbilities } from '../sequences/index.js';
import type { Problem, Result } from '../shared/index.js';
import { profileOf, type ToleranceProfile } from '../tolerance/index.js';
import { castFor, type Cast } from './cast.js';
import { choiceProblem } from './choice-problem.js';
import type { EvidenceBook } from './evidence.js';
import type { ExamRequest } from './request.js';
import type { ChoiceProblem } from './solver/problem.js';
import { fixedTime, type FixedTime } from './table-parts.js';

/** What planning stands on: the site's library and what its sequences show. */
export interface PlanningGround {
  readonly library: SiteLibrary;
  readonly evidence: EvidenceBook;
}

/** A request made ready for choosing on one scanner. */
export interface Prepared {
  readonly request: ExamRequest;
  readonly scanner: ScannerAbilities;
  readonly exam: Exam;
  readonly questions: readonly ClinicalQuestion[];
  readonly profile: ToleranceProfile;
  readonly fixed: FixedTime;
  readonly cast: Cast;
  readonly problem: ChoiceProblem;
}

/** Finds the exam and its asked questions, or says which id is unknown and which there are. */
export function examOf(
  request: Pick<ExamRequest, 'id' | 'examId' | 'questionIds'>,
  library: SiteLibrary,
): Result<{ readonly exam: Exam; readonly questions: readonly ClinicalQuestion[] }> {
  const exam = library.exams.get(request.examId);
  if (exam === undefined) {
    return refusal(
      request.id,
      'exam',
      request.examId,
      `known exams: ${[...library.exams.keys()].join(', ')}`,
      'Use one of the known exams, or add its file to the library.',
    );
  }
  const unknown = request.questionIds.filter((id) => !exam.questions.some((q) => q.id === id));
  if (unknown.length > 0) {
    return refusal(
      request.id,
      'questions',
      unknown.join(', '),
      `"${exam.name}" has: ${exam.questions.map((q) => q.id).join(', ')}`,
      'Use the question ids of the exam, or leave the field empty for all of them.',
    );
  }
  const questions =
    request.questionIds.length === 0
      ? exam.questions
      : exam.questions.filter((q) => request.questionIds.includes(q.id));
  return { kind: 'ok', value: { exam, questions } };
}

/**
 * Times and grades everything that could be run for a request on a scanner.
 *
 * @param known the fixed time, where a variation of the same request has it already
 */
export function prepare(
  request: ExamRequest,
  scanner: ScannerAbilities,
  ground: PlanningGround,
  known?: FixedTime,
): Result<Prepared> {
  const found = examOf(request, ground.library);
  if (found.kind === 'refused') return found;
  const { exam, questions } = found.value;
  if (!scanner.coils.includes(exam.coil)) {
    return refusal(
      request.id,
      'scanner',
      scanner.id,
      `"${exam.name}" needs the ${exam.coil} coil; this scanner has ${scanner.coils.join(', ')}`,
      'Book a scanner that has the coil.',
    );
  }
  if (!(request.slotS > 0)) {
    return refusal(
      request.id,
      'slot',
      `${request.slotS} s`,
      'a slot is longer than nothing',
      'Give a slot length, for example 30 min.',
    );
  }
  const { policy } = ground.library;
  const profile = profileOf(request.tolerance, policy);
  const fixed = known ?? fixedTime(request, exam, policy);
  const cast = castFor({
    ...ground,
    exam,
    questions,
    scanner,
    profile,
    request,
  });
  const problem = choiceProblem({ cast, fixed, profile, policy, slotS: request.slotS });
  return {
    kind: 'ok',
    value: { request, scanner, exam, questions, profile, fixed, cast, problem },
  };
}

function refusal(
  requestId: string,
  field: string,
  value: string,
  limit: string,
  wayOut: string,
): { readonly kind: 'refused'; readonly problems: readonly Problem[] } {
  return {
    kind: 'refused',
    problems: [
      {
        code: `request-${field}`,
        thing: `request ${requestId}, field ${field}`,
        value: `"${value}"`,
        limit,
        wayOut,
      },
    ],
  };
}
