import { bitsOf, type Compiled } from './compiled.js';
import { fitFor } from './fit.js';
import { judgeChoice } from './judge.js';
import { searchPicks } from './pick-search.js';
import { compareWorth, nothing, sharedOf, withGrade, worthOf, type Worth } from './worth.js';

export interface GradeSearchResult {
  readonly picks: readonly number[];
  readonly nodes: number;
  /** False when the node limit was reached. */
  readonly complete: boolean;
}

/**
 * Branch and bound over grade vectors: question by question, heaviest first, best grade first. A
 * partial vector forces views and narrows their candidates; it is given up when even the earliest
 * envelope of what is left in each forced view misses the slot, or when no completion can beat the
 * best known. A whole vector goes to the search over picks. Method: branch and bound (Land and Doig 1960).
 * @param slotGivenS the slot, seconds; the model's own is not used
 * @param start picks known to be allowed, to begin from
 */
export function gradeSearch(
  model: Compiled,
  slotGivenS: number,
  nodeLimit: number,
  start?: readonly number[],
): GradeSearchResult {
  const slotS = Math.max(0, Math.floor(slotGivenS));
  const { problem } = model;
  const { questions, views, baseNominalS, stayLimitS } = problem;
  const order = questions
    .map((_, q) => q)
    .filter((q) => questions[q]!.needs.length > 0)
    .sort((a, b) => questions[b]!.weight - questions[a]!.weight || a - b);
  const fit = fitFor(model, slotS);
  let nodes = 0;
  const step = (): boolean => ++nodes <= nodeLimit;
  let bestPicks: readonly number[] = views.map(() => -1);
  let best: Worth = nothing;
  const record = (picks: readonly number[]): void => {
    const worth = worthOf(model, picks);
    if (compareWorth(worth, best) > 0) {
      best = worth;
      bestPicks = picks;
    }
  };

  /** Highest grade a question can still reach by itself beside what is forced. */
  function reachable(q: number, forced: number, masks: Int32Array): number {
    for (let g = 3; g > 0; g--) {
      const narrowed = narrow(q, g, masks);
      if (narrowed !== undefined && fit.may(forced | model.forcedBy[q]!, narrowed)) return g;
    }
    return 0;
  }

  function narrow(q: number, g: number, masks: Int32Array): Int32Array | undefined {
    const narrowed = masks.slice();
    for (const v of questions[q]!.needs) narrowed[v]! &= model.eligible[v]![q]![g]!;
    return bitsOf(model.forcedBy[q]!).some((v) => narrowed[v] === 0) ? undefined : narrowed;
  }

  /** @returns false when the node limit ends the search */
  function descend(level: number, got: Worth, forced: number, masks: Int32Array): boolean {
    if (!step()) return false;
    if (level === order.length) return finish(got, forced, masks);
    const tops = order.slice(level).map((q) => reachable(q, forced, masks));
    let possible = forced;
    let bound = got;
    tops.forEach((g, i) => {
      const q = order[level + i]!;
      if (g > 0) possible |= model.forcedBy[q]!;
      bound = withGrade(bound, questions[q]!.weight, g);
    });
    bound = { ...bound, value: mostValue(forced, possible, masks) };
    if (compareWorth(bound, best) <= 0) return true;
    const q = order[level]!;
    let tried: Int32Array | undefined;
    for (let g = tops[0]!; g >= 0; g--) {
      const narrowed = g === 0 ? masks : narrow(q, g, masks);
      if (narrowed === undefined) continue;
      // A lower grade that admits nothing new is no better than the grade just tried.
      if (g > 0 && tried !== undefined && narrowed.every((mask, v) => mask === tried![v])) continue;
      tried = narrowed;
      const now = g === 0 ? forced : forced | model.forcedBy[q]!;
      if (g > 0 && !(fit.may(now, narrowed) && fit.earliest(now, narrowed))) continue;
      const worth = withGrade(got, questions[q]!.weight, g);
      if (!descend(level + 1, worth, now, narrowed)) return false;
    }
    return true;
  }

  function mostValue(forced: number, possible: number, masks: Int32Array): number {
    let most = 0;
    for (const v of bitsOf(possible)) {
      const top = mostIn(model.values[v]!, masks[v]!);
      most += (forced & (1 << v)) !== 0 ? top : Math.max(0, top);
    }
    for (const s of sharedOf(model, forced)) most -= problem.shared[s]!.nominalS;
    return most;
  }

  function finish(got: Worth, forced: number, masks: Int32Array): boolean {
    if (forced === 0) return true;
    const tiers = compareWorth({ ...got, value: 0 }, { ...best, value: 0 });
    if (tiers < 0) return true;
    const sharedS = sharedOf(model, forced).reduce(
      (sum, s) => sum + problem.shared[s]!.nominalS,
      0,
    );
    const fixed = fit.fixed(forced);
    searchPicks(
      model,
      {
        views: bitsOf(forced),
        allowed: masks,
        spent: fixed.curve,
        spentFromS: fixed.fromS,
        nominalLeftS: stayLimitS - baseNominalS - sharedS,
        above: tiers > 0 ? -Infinity : best.value + sharedS,
      },
      {
        found: record,
        settle: (picks) => judgeChoice({ ...problem, slotS }, picks).feasible,
        step,
      },
    );
    return nodes <= nodeLimit;
  }

  if (start?.some((pick) => pick !== -1)) record(start);
  if (fit.base) descend(0, nothing, 0, Int32Array.from(model.everything));
  return { picks: bestPicks, nodes: Math.min(nodes, nodeLimit), complete: nodes <= nodeLimit };
}

function mostIn(values: readonly number[], mask: number): number {
  let most = -Infinity;
  for (let c = 0; c < values.length; c++) {
    if ((mask & (1 << c)) !== 0 && values[c]! > most) most = values[c]!;
  }
  return most;
}
