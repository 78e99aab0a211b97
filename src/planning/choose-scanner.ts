import type { ScannerAbilities } from '../sequences/index.js';
import { prepare, type PlanningGround } from './prepare.js';
import type { ExamRequest } from './request.js';
import { chooseExactly } from './solver/exact.js';
import { compareObjectives, type ChoiceObjective } from './solver/problem.js';

/**
 * The scanner on which a request not yet placed gets the best answers; the first listed wins a tie.
 * Undefined when none can take it at all.
 */
export function bestScanner<T extends ScannerAbilities>(
  request: ExamRequest,
  scanners: readonly T[],
  ground: PlanningGround,
): T | undefined {
  let best: { readonly scanner: T; readonly objective: ChoiceObjective } | undefined;
  for (const scanner of scanners) {
    const ready = prepare(request, scanner, ground);
    if (ready.kind !== 'ok') continue;
    const { objective } = chooseExactly(ready.value.problem);
    if (best === undefined || compareObjectives(objective, best.objective) > 0) {
      best = { scanner, objective };
    }
  }
  return best?.scanner;
}
