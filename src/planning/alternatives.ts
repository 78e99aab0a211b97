import { gradeOf, gradeWords } from '../exams/index.js';
import type { Alternatives } from './plan.js';
import type { Prepared } from './prepare.js';
import { compareObjectives, type Choice } from './solver/problem.js';
import type { SecondVisit } from './two-visits.js';

/** What stands beside the plan: the shortest slot that answers everything, where more time stops paying, two visits. */
export function alternativesOf(
  prepared: Prepared,
  choices: ReadonlyMap<number, Choice>,
  visit: SecondVisit | undefined,
): Alternatives {
  const points = [...choices];
  const full = points.find(([, choice]) => choice.ranks.every((rank) => rank === 3));
  const last = points[points.length - 1];
  const asked = choices.get(prepared.request.slotS);
  const same = points.find(([, choice]) =>
    choice.ranks.every((rank, n) => rank >= (asked?.ranks[n] ?? 0)),
  );
  const settled =
    last === undefined
      ? undefined
      : points.find(([, choice]) => compareObjectives(choice.objective, last[1].objective) === 0);
  return {
    ...(full === undefined
      ? { noneBecause: noneBecause(prepared, last?.[1]) }
      : { shortestAllDiagnosticS: full[0] }),
    sameGradesFromS: same?.[0] ?? prepared.request.slotS,
    nothingMoreAfterS: settled?.[0] ?? prepared.request.slotS,
    ...(visit === undefined
      ? {}
      : {
          twoVisits: {
            secondVisit: visit.sequences,
            grades: prepared.questions.map((question, index) => {
              const grade = gradeOf(visit.ranks[index] ?? 0);
              return { questionId: question.id, grade, words: gradeWords[grade] };
            }),
          },
        }),
  };
}

function noneBecause(prepared: Prepared, longest: Choice | undefined): string {
  const open = prepared.questions
    .filter((_, index) => (longest?.ranks[index] ?? 0) < 3)
    .map((q) => `"${q.name}"`);
  return `No slot length makes ${open.join(', ')} diagnostic for this patient on this scanner.`;
}
