import type { ChoiceCandidate, ChoiceProblem } from './problem.js';
import { isNoLater } from './spent-time.js';

export interface Pruned {
  readonly problem: ChoiceProblem;
  /** Per view, the original index of each candidate kept. */
  readonly kept: readonly (readonly number[])[];
}

/**
 * Removes candidates that another of the same view equals or beats in everything: rank for every question
 * that needs the view, quality, nominal time and table time in stochastic order. Exchanging a
 * dominated pick for its dominator keeps every row and lowers no objective, so the optimum stays. Of equals the
 * first remains.
 */
export function withoutDominated(problem: ChoiceProblem): Pruned {
  const kept = problem.views.map((view, v) => {
    const asking = problem.questions.flatMap((question, q) =>
      question.needs.includes(v) ? [q] : [],
    );
    return view.candidates.flatMap((candidate, c) => {
      const beaten = view.candidates.some(
        (other, o) =>
          o !== c &&
          dominates(other, candidate, asking) &&
          (o < c || !dominates(candidate, other, asking)),
      );
      return beaten ? [] : [c];
    });
  });
  const views = problem.views.map((view, v) => ({
    ...view,
    candidates: view.candidates.filter((_, c) => kept[v]!.includes(c)),
  }));
  return { problem: { ...problem, views }, kept };
}

/** Picks of the pruned problem as picks of the original. */
export function originalPicks(pruned: Pruned, picks: readonly number[]): number[] {
  return picks.map((pick, v) => (pick === -1 ? -1 : (pruned.kept[v]?.[pick] ?? -1)));
}

function dominates(a: ChoiceCandidate, b: ChoiceCandidate, asking: readonly number[]): boolean {
  return (
    a.quality >= b.quality &&
    a.nominalS <= b.nominalS &&
    asking.every((q) => (a.ranks[q] ?? 0) >= (b.ranks[q] ?? 0)) &&
    isNoLater(a.time, b.time)
  );
}
