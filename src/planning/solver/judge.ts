import { chanceWithin, convolve } from '../distribution.js';
import type { GradeRank } from '../../exams/index.js';
import type { Choice, ChoiceObjective, ChoiceProblem } from './problem.js';

/** Rounding allowance on probabilities: sums of masses in another order differ by about 1e-15. */
export const chanceTolerance = 1e-9;

/** What checking every row of a problem against a set of picks found. */
export interface Judgement {
  readonly feasible: boolean;
  /** The rows that do not hold, in words. */
  readonly broken: readonly string[];
  readonly choice: Choice;
}

/**
 * Checks every row of the problem from scratch and computes grades, objective and table time of the
 * picks. Shares nothing with any solver; every solver and test goes through here.
 * @param picks candidate index per view, -1 for none
 */
export function judgeChoice(problem: ChoiceProblem, picks: readonly number[]): Judgement {
  const broken: string[] = [];
  const { views } = problem;
  if (picks.length !== views.length) {
    broken.push(`${picks.length} picks for ${views.length} views`);
  }
  const taken = views.map((view, v) => {
    const pick = picks[v] ?? -1;
    if (pick === -1) return undefined;
    const candidate = view.candidates[pick];
    if (candidate === undefined) broken.push(`view ${view.id} has no candidate ${pick}`);
    return candidate;
  });
  const chosen = taken.map((candidate) => candidate !== undefined);
  const ranks = ranksOf(problem, picks);
  for (const idle of idleViews(problem, chosen, ranks)) {
    broken.push(`view ${views[idle]?.id ?? idle} is run but serves no answer`);
  }
  views.forEach((view, v) => {
    const twin = view.requiresView;
    if (twin !== undefined && chosen[v] === true && chosen[twin] !== true) {
      broken.push(`view ${view.id} needs view ${views[twin]?.id ?? twin}, which is not chosen`);
    }
  });
  let nominalS = 0;
  let quality = 0;
  let tableTime = problem.base;
  for (const shared of problem.shared) {
    if (!shared.views.some((v) => chosen[v])) continue;
    nominalS += shared.nominalS;
    tableTime = convolve(tableTime, shared.time);
  }
  for (const candidate of taken) {
    if (candidate === undefined) continue;
    nominalS += candidate.nominalS;
    quality += candidate.quality;
    tableTime = convolve(tableTime, candidate.time);
  }
  const chance = chanceWithin(tableTime, problem.slotS);
  if (chosen.some(Boolean)) {
    const stayS = nominalS + problem.baseNominalS;
    if (stayS > problem.stayLimitS) {
      broken.push(`${stayS} s in the scanner exceed the stay limit of ${problem.stayLimitS} s`);
    }
    if (chance < problem.confidence - chanceTolerance) {
      broken.push(
        `ends within ${problem.slotS} s with probability ${chance.toFixed(4)}, asked ${problem.confidence}`,
      );
    }
  }
  const objective = objectiveOf(problem, ranks, quality, nominalS);
  return {
    feasible: broken.length === 0,
    broken,
    choice: { picks: [...picks], ranks, objective, chance, tableTime, provedBy: 'row check only' },
  };
}

/** Grade reached per question: the lowest over the views it needs; none where a view is not chosen. */
export function ranksOf(problem: ChoiceProblem, picks: readonly number[]): GradeRank[] {
  return problem.questions.map((question, q) => {
    let lowest: GradeRank = question.needs.length === 0 ? 0 : 3;
    for (const need of question.needs) {
      const rank = problem.views[need]?.candidates[picks[need] ?? -1]?.ranks[q] ?? 0;
      if (rank < lowest) lowest = rank;
    }
    return lowest;
  });
}

function idleViews(
  problem: ChoiceProblem,
  chosen: readonly boolean[],
  ranks: readonly GradeRank[],
): number[] {
  const serving = new Set<number>();
  const mark = (v: number | undefined): void => {
    if (v === undefined || serving.has(v)) return;
    serving.add(v);
    mark(problem.views[v]?.requiresView);
  };
  problem.questions.forEach((question, q) => {
    if ((ranks[q] ?? 0) > 0) question.needs.forEach(mark);
  });
  return chosen.flatMap((is, v) => (is && !serving.has(v) ? [v] : []));
}

function objectiveOf(
  problem: ChoiceProblem,
  ranks: readonly GradeRank[],
  quality: number,
  nominalS: number,
): ChoiceObjective {
  const weightAt = (least: GradeRank): number =>
    problem.questions.reduce(
      (sum, { weight }, q) => sum + ((ranks[q] ?? 0) >= least ? weight : 0),
      0,
    );
  return {
    diagnostic: weightAt(3),
    targeted: weightAt(2),
    screening: weightAt(1),
    quality,
    nominalS,
  };
}
