import { gradeOf, gradeWords } from '../exams/index.js';
import type { CurvePoint } from './plan.js';
import type { Prepared } from './prepare.js';
import { chooseCurve } from './solver/exact.js';
import type { Choice } from './solver/problem.js';

const stepS = 300;

/** Slot lengths the curve is drawn for: every five minutes from ten minutes to an hour, further if asked, and the asked one. */
export function curveSlotsS(askedS: number): readonly number[] {
  const lastS = Math.max(3600, Math.ceil(askedS / stepS) * stepS + 6 * stepS);
  const slots = new Set<number>([askedS]);
  for (let s = 2 * stepS; s <= lastS; s += stepS) slots.add(s);
  return [...slots].sort((a, b) => a - b);
}

/** The best choice at each slot length: what every further five minutes would buy. */
export function choicesAlongCurve(prepared: Prepared): ReadonlyMap<number, Choice> {
  const slots = curveSlotsS(prepared.request.slotS);
  const choices = chooseCurve(prepared.problem, slots);
  return new Map(slots.map((slotS, index) => [slotS, choices[index] as Choice]));
}

/** The curve as plain data, grades never without their words. */
export function curvePoints(
  prepared: Prepared,
  choices: ReadonlyMap<number, Choice>,
): readonly CurvePoint[] {
  return [...choices].map(([slotS, choice]) => ({
    slotS,
    chanceToFinish: choice.chance,
    grades: gradesOf(prepared, choice),
    sequences: choice.picks.flatMap((pick, view) => {
      const candidate = prepared.cast.views[view]?.candidates[pick];
      return candidate === undefined ? [] : [candidate.sequence.id];
    }),
  }));
}

/** Grade and words per asked question. */
export function gradesOf(prepared: Prepared, choice: Choice): CurvePoint['grades'] {
  return prepared.questions.map((question, index) => {
    const grade = gradeOf(choice.ranks[index] ?? 0);
    return { questionId: question.id, grade, words: gradeWords[grade] };
  });
}
