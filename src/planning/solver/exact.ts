import type { Choice, ChoiceProblem } from './problem.js';
import { judgeChoice } from './problem.js';

export function chooseExactly(
  problem: ChoiceProblem,
  _options: { readonly nodeLimit?: number } = {},
): Choice {
  return judgeChoice(
    problem,
    problem.views.map(() => -1),
  ).choice;
}

export function chooseCurve(problem: ChoiceProblem, slotsS: readonly number[]): readonly Choice[] {
  return slotsS.map((slotS) => chooseExactly({ ...problem, slotS }));
}
