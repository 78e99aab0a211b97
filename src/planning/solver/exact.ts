import { compiled } from './compiled.js';
import { gradeSearch } from './grade-search.js';
import { originalPicks, withoutDominated } from './prune.js';
import { judgeChoice, type Choice, type ChoiceProblem } from './problem.js';

export interface ExactOptions {
  /** Most nodes visited; when reached, the best found stands and `provedBy` says that it is not proved. */
  readonly nodeLimit?: number;
}

const defaultNodeLimit = 3_000_000;

/**
 * The best choice, exact: dominated candidates go, then branch and bound over question-grade vectors.
 * The chance to end inside the slot is the exact convolution, so more slot never lowers the answer.
 * @throws ProblemError for more than 30 views or 30 undominated candidates of a view
 */
export function chooseExactly(problem: ChoiceProblem, options: ExactOptions = {}): Choice {
  return chooser(problem, options)(problem.slotS, undefined);
}

/**
 * The best choice for each slot, seconds; same objectives as `chooseExactly` slot by slot. Slots are taken from
 * short to long, each search starting from the answer before it, which stays allowed.
 */
export function chooseCurve(
  problem: ChoiceProblem,
  slotsS: readonly number[],
  options: ExactOptions = {},
): readonly Choice[] {
  const choose = chooser(problem, options);
  const answers = new Map<number, Choice>();
  let before: Choice | undefined;
  for (const slotS of [...slotsS].sort((a, b) => a - b)) {
    before = choose(slotS, before);
    answers.set(slotS, before);
  }
  return slotsS.map((slotS) => answers.get(slotS)!);
}

function chooser(problem: ChoiceProblem, options: ExactOptions) {
  const nodeLimit = options.nodeLimit ?? defaultNodeLimit;
  const pruned = withoutDominated(problem);
  const model = compiled(pruned.problem);
  return (slotS: number, start: Choice | undefined): Choice => {
    const asked = { ...problem, slotS };
    const startPicks = start?.picks.map((pick, v) => pruned.kept[v]!.indexOf(pick));
    const result = gradeSearch(model, slotS, nodeLimit, startPicks);
    const { feasible, broken, choice } = judgeChoice(asked, originalPicks(pruned, result.picks));
    if (!feasible) throw new Error(`branch and bound broke its own rows: ${broken.join('; ')}`);
    const provedBy = result.complete
      ? `exact branch and bound, ${result.nodes} nodes`
      : `branch and bound stopped at ${nodeLimit} nodes: best found, not proved`;
    return { ...choice, provedBy };
  };
}
