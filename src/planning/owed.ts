import type { SitePolicy } from '../exams/index.js';
import type { AnswerOwed, PlannedAnswer } from './plan.js';
import type { ExamRequest } from './request.js';

/** Questions that will still be owed a diagnostic answer after this exam, due in the policy's days. */
export function answersOwed(
  answers: readonly PlannedAnswer[],
  request: ExamRequest,
  policy: SitePolicy,
): readonly AnswerOwed[] {
  const dueInDays = policy.owed.dueDays[request.priority].value;
  return answers
    .filter((a) => a.grade !== 'diagnostic')
    .map(({ questionId, name, grade, words, because }) => ({
      questionId,
      name,
      grade,
      words,
      dueInDays,
      because,
    }));
}
