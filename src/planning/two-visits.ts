import type { GradeRank } from '../exams/index.js';
import type { Prepared } from './prepare.js';
import { chooseExactly } from './solver/exact.js';
import type { Choice, ChoiceProblem } from './solver/problem.js';

/** What two visits in slots of the asked length would get. */
export interface SecondVisit {
  /** Best grade per question over both visits. */
  readonly ranks: readonly GradeRank[];
  /** Names of the sequences of the second visit. */
  readonly sequences: readonly string[];
}

/**
 * Plans a second visit for the questions that the first leaves below diagnostic; views that the first
 * visit served at diagnostic grade need not be run again. Undefined when nothing is left or nothing is won.
 */
export function secondVisit(prepared: Prepared, first: Choice): SecondVisit | undefined {
  const { problem, cast } = prepared;
  const open = problem.questions.flatMap((_, index) =>
    (first.ranks[index] ?? 0) < 3 ? [index] : [],
  );
  if (open.length === 0) return undefined;
  const done = (view: number, question: number) =>
    problem.views[view]?.candidates[first.picks[view] ?? -1]?.ranks[question] === 3;
  const needsAgain = new Map(
    open.map((q) => [q, (problem.questions[q]?.needs ?? []).filter((view) => !done(view, q))]),
  );
  const wanted = new Set([...needsAgain.values()].flat());
  for (const view of [...wanted]) {
    const twin = problem.views[view]?.requiresView;
    if (twin !== undefined) wanted.add(twin);
  }
  const again: ChoiceProblem = {
    ...problem,
    questions: open.map((q) => ({ ...problem.questions[q]!, needs: needsAgain.get(q) ?? [] })),
    views: problem.views.map((view, index) => ({
      ...view,
      candidates: wanted.has(index)
        ? view.candidates.map((c) => ({ ...c, ranks: open.map((q) => c.ranks[q] ?? 0) }))
        : [],
    })),
  };
  const second = chooseExactly(again);
  const ranks = problem.questions.map((_, index) => {
    const at = open.indexOf(index);
    const won = at < 0 ? 0 : (second.ranks[at] ?? 0);
    return Math.max(first.ranks[index] ?? 0, won) as GradeRank;
  });
  if (ranks.every((rank, index) => rank === (first.ranks[index] ?? 0))) return undefined;
  const sequences = second.picks.flatMap((pick, view) => {
    const candidate = wanted.has(view) ? cast.views[view]?.candidates[pick] : undefined;
    return candidate === undefined ? [] : [candidate.sequence.name];
  });
  return { ranks, sequences };
}
