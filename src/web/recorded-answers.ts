import { gradeWords, type Grade } from '../exams/index.js';
import type { StoredRequest } from '../store/index.js';
import type { PageDeps } from './deps.js';

/** What a done exam answered, as it was recorded; the plan it once had says nothing any more. */
export interface RecordedAnswer {
  readonly questionId: string;
  readonly name: string;
  readonly grade: Grade;
  readonly words: string;
}

/** Recorded answers of the done ones among some requests, by request. */
export async function recordedAnswers(
  { store, ground }: Pick<PageDeps, 'store' | 'ground'>,
  requests: readonly StoredRequest[],
): Promise<ReadonlyMap<string, RecordedAnswer[]>> {
  const done = requests.filter((r) => r.status === 'done');
  const recorded = await store.owed.recorded(done.map((r) => r.id));
  return new Map(
    done.flatMap(({ id, body }) => {
      const grades = recorded.get(id);
      if (grades === undefined) return [];
      const questions = ground.library.exams.get(body.examId)?.questions ?? [];
      return [
        [
          id,
          [...grades].map(([questionId, grade]) => ({
            questionId,
            name: questions.find((q) => q.id === questionId)?.name ?? questionId,
            grade,
            words: gradeWords[grade],
          })),
        ],
      ];
    }),
  );
}
