import { noShow } from './mend-no-show.js';
import { farShiftMin, type MendOutcome, type MendProblem, type Repair } from './mend-problem.js';
import { repair } from './mend-repair.js';

export interface MendOptions {
  readonly nodeBudget?: number;
}

/** Limits on everybody's shift that are tried, tightest first. */
const shiftLimitsMin = [60, farShiftMin];

/**
 * The least disturbing repairs after an event: fewest without a place, fewest moved, least shift; nobody on the way in is
 * moved. Where that moves somebody far, a proposal in which nobody moves far stands beside it, with more people moved;
 * and one with shorter slots at the cost of answers, where it disturbs fewer. Nothing is applied.
 */
export function mend(problem: MendProblem, options: MendOptions = {}): MendOutcome {
  if (problem.event.kind === 'no-show') return noShow(problem, problem.event.requestId);
  const nodeBudget = options.nodeBudget ?? 4000;
  const kept = repair(problem, { shorterSlots: false }, nodeBudget);
  const nearer = nearerThan(kept, problem, nodeBudget);
  const beside = nearer === undefined ? [kept] : [kept, nearer];
  if (kept.peopleMoved < 2 && kept.withoutPlace.length === 0) return { proposals: beside };
  const shorter = repair(problem, { shorterSlots: true }, nodeBudget);
  const disturbsFewer =
    shorter.withoutPlace.length < kept.withoutPlace.length ||
    (shorter.withoutPlace.length === kept.withoutPlace.length &&
      shorter.peopleMoved < kept.peopleMoved);
  return { proposals: disturbsFewer ? [...beside, shorter] : beside };
}

/** A repair in which nobody moves far and nobody more is left without a place, where the first moves somebody far. */
function nearerThan(kept: Repair, problem: MendProblem, nodeBudget: number): Repair | undefined {
  const longest = Math.max(0, ...kept.moves.map((m) => (m.from === undefined ? 0 : m.shiftMin)));
  if (longest <= farShiftMin) return undefined;
  for (const shiftLimitMin of shiftLimitsMin) {
    const limited = repair(problem, { shorterSlots: false, shiftLimitMin }, nodeBudget);
    if (limited.withoutPlace.length <= kept.withoutPlace.length) return limited;
  }
  return undefined;
}
