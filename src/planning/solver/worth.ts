import type { Compiled } from './compiled.js';
import { ranksOf } from './judge.js';

/** The objective as searched: three sums of weights, then quality and time as one whole number. */
export interface Worth {
  /** Weights at rank 3. */
  readonly diagnostic: number;
  /** Weights at rank 2 or more. */
  readonly targeted: number;
  /** Weights at rank 1 or more. */
  readonly screening: number;
  /** Quality times the quality step minus nominal seconds, shared times included. */
  readonly value: number;
}

export const nothing: Worth = { diagnostic: 0, targeted: 0, screening: 0, value: 0 };

export function worthOf(model: Compiled, picks: readonly number[]): Worth {
  const { problem } = model;
  const ranks = ranksOf(problem, picks);
  let chosen = 0;
  let value = 0;
  picks.forEach((c, v) => {
    if (c === -1) return;
    chosen |= 1 << v;
    value += model.values[v]![c]!;
  });
  for (const s of sharedOf(model, chosen)) value -= problem.shared[s]!.nominalS;
  return problem.questions.reduce((worth, { weight }, q) => withGrade(worth, weight, ranks[q]!), {
    ...nothing,
    value,
  });
}

/** One more question of this weight at this grade. */
export function withGrade(worth: Worth, weight: number, grade: number): Worth {
  return {
    diagnostic: worth.diagnostic + (grade >= 3 ? weight : 0),
    targeted: worth.targeted + (grade >= 2 ? weight : 0),
    screening: worth.screening + (grade >= 1 ? weight : 0),
    value: worth.value,
  };
}

/** Lexicographic: above zero when `a` is worth more. */
export function compareWorth(a: Worth, b: Worth): number {
  return (
    a.diagnostic - b.diagnostic ||
    a.targeted - b.targeted ||
    a.screening - b.screening ||
    a.value - b.value
  );
}

/** Indices of the shared times that a mask of views sets off. */
export function sharedOf(model: Compiled, views: number): number[] {
  return model.sharedViews.flatMap((mask, s) => ((mask & views) !== 0 ? [s] : []));
}
