import { bitsOf, rates, type Compiled } from './compiled.js';
import { chanceTolerance, judgeChoice, ranksOf } from './judge.js';
import { searchPicks } from './pick-search.js';
import type { GradeRank } from './problem.js';
import {
  chanceAfter,
  cumulative,
  equivalentS,
  roomS,
  spend,
  type SparseTime,
} from './spent-time.js';

/** Sums of weights at rank 3, at least 2, at least 1; and quality and time as one value. */
interface Worth {
  readonly diagnostic: number;
  readonly targeted: number;
  readonly screening: number;
  readonly value: number;
}

export interface GradeSearchResult {
  readonly picks: readonly number[];
  readonly nodes: number;
  /** False when the node limit was reached. */
  readonly complete: boolean;
}

/** Positions in `rates` for the quick additive test before the exact one. */
const quickRates = [0, 2, 4];

/**
 * Branch and bound over grade vectors: question by question, heaviest first, best grade first. A partial
 * vector forces views and narrows their candidates; it is given up when even the earliest envelope of what is left
 * in each forced view misses the slot, or when no completion can beat the best known. A whole vector
 * goes to the search over picks.
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
  const { questions, views, confidence, baseNominalS, stayLimitS } = problem;
  const wanted = confidence - chanceTolerance;
  const order = questions
    .map((_, q) => q)
    .filter((q) => questions[q]!.needs.length > 0)
    .sort((a, b) => questions[b]!.weight - questions[a]!.weight || a - b);
  const base = cumulative(problem.base, slotS);
  const baseFromS = problem.base.startS;
  const anything = { leastS: 0, mostS: slotS };
  const quick = quickRates.map((k) => ({
    room: roomS(base, baseFromS, wanted - 1e-9, rates[k]!, anything),
    candidates: model.equivalents[k]!,
    shared: model.sharedTimes.map((time) => equivalentS(time, rates[k]!)),
  }));
  const nominals = views.map((view) => view.candidates.map((c) => c.nominalS));

  let nodes = 0;
  const step = (): boolean => ++nodes <= nodeLimit;
  let bestPicks: readonly number[] = views.map(() => -1);
  let best: Worth = { diagnostic: 0, targeted: 0, screening: 0, value: 0 };
  const record = (picks: readonly number[]): void => {
    const worth = worthOf(picks);
    if (compareWorth(worth, best) > 0) {
      best = worth;
      bestPicks = picks;
    }
  };
  const sharedOf = (forced: number): number[] =>
    model.sharedViews.flatMap((mask, s) => ((mask & forced) !== 0 ? [s] : []));

  function worthOf(picks: readonly number[]): Worth {
    const ranks = ranksOf(problem, picks);
    let chosen = 0;
    let value = 0;
    picks.forEach((c, v) => {
      if (c === -1) return;
      chosen |= 1 << v;
      value += model.values[v]![c]!;
    });
    for (const s of sharedOf(chosen)) value -= problem.shared[s]!.nominalS;
    const at = (least: number) =>
      questions.reduce((sum, { weight }, q) => sum + (ranks[q]! >= least ? weight : 0), 0);
    return { diagnostic: at(3), targeted: at(2), screening: at(1), value };
  }

  /** Cheap necessary conditions: additive time at several rates, nominal stay. */
  function mayFit(forced: number, masks: Int32Array): boolean {
    const members = bitsOf(forced);
    const shared = sharedOf(forced);
    let stayS = baseNominalS + shared.reduce((sum, s) => sum + problem.shared[s]!.nominalS, 0);
    for (const v of members) stayS += leastIn(nominals[v]!, masks[v]!);
    if (stayS > stayLimitS) return false;
    return quick.every((table) => {
      let timeS = 0;
      for (const s of shared) timeS += table.shared[s]!;
      for (const v of members) timeS += leastIn(table.candidates[v]!, masks[v]!);
      return timeS <= table.room + 1e-6;
    });
  }

  const curves = [new Float64Array(slotS + 1), new Float64Array(slotS + 1)];
  /** Adds times one after the other to a curve; `ahead` is what may follow all of them. */
  function spendAll(
    start: Float64Array,
    startFromS: number,
    times: readonly SparseTime[],
    ahead: { readonly leastS: number; readonly mostS: number },
  ): { curve: Float64Array; fromS: number } {
    let leastS = times.reduce((sum, time) => sum + time.leastS, ahead.leastS);
    let mostS = times.reduce((sum, time) => sum + time.mostS, ahead.mostS);
    let curve = start;
    let fromS = startFromS;
    for (const time of times) {
      leastS -= time.leastS;
      mostS -= time.mostS;
      const out = curve === curves[0] ? curves[1]! : curves[0]!;
      fromS = spend(curve, fromS, time, { leastS, mostS }, out);
      curve = out;
    }
    return { curve, fromS };
  }

  /** The exact necessary condition: earliest envelopes of all forced views together. */
  function envelopeFits(forced: number, masks: Int32Array): boolean {
    const times = [
      ...sharedOf(forced).map((s) => model.sharedTimes[s]!),
      ...bitsOf(forced).map((v) => model.envelope(v, masks[v]!)),
    ].sort((a, b) => a.atS.length - b.atS.length);
    // The widest comes last, where only one value of the sum is needed.
    const last = times.pop();
    if (last === undefined) return true;
    return chanceAfter(spendAll(base, baseFromS, times, last).curve, last) >= wanted - 1e-10;
  }

  /** Highest grade a question can still reach by itself beside what is forced. */
  function reachable(q: number, forced: number, masks: Int32Array): GradeRank {
    for (let g = 3; g > 0; g--) {
      const narrowed = narrow(q, g, masks);
      if (narrowed !== undefined && mayFit(forced | model.forcedBy[q]!, narrowed))
        return g as GradeRank;
    }
    return 0;
  }

  function narrow(q: number, g: number, masks: Int32Array): Int32Array | undefined {
    const narrowed = masks.slice();
    for (const v of questions[q]!.needs) {
      const left = narrowed[v]! & model.eligible[v]![q]![g]!;
      if (left === 0) return undefined;
      narrowed[v] = left;
    }
    for (const v of bitsOf(model.forcedBy[q]!)) if (narrowed[v] === 0) return undefined;
    return narrowed;
  }

  function descend(level: number, got: Worth, forced: number, masks: Int32Array): boolean {
    if (!step()) return false;
    if (level === order.length) return finish(got, forced, masks);
    const tops = order.slice(level).map((q) => reachable(q, forced, masks));
    let possible = forced;
    let bound = got;
    tops.forEach((g, i) => {
      const q = order[level + i]!;
      if (g > 0) possible |= model.forcedBy[q]!;
      bound = plus(bound, questions[q]!.weight, g);
    });
    if (compareWorth({ ...bound, value: mostValue(forced, possible, masks) }, best) <= 0)
      return true;
    const q = order[level]!;
    let tried: Int32Array | undefined;
    for (let g = tops[0]!; g >= 0; g--) {
      const narrowed = g === 0 ? masks : narrow(q, g, masks);
      if (narrowed === undefined) continue;
      // A lower grade that admits nothing new is no better than the grade just tried.
      if (g > 0 && tried !== undefined && sameMasks(tried, narrowed)) continue;
      tried = narrowed;
      const now = g === 0 ? forced : forced | model.forcedBy[q]!;
      if (g > 0 && !(mayFit(now, narrowed) && envelopeFits(now, narrowed))) continue;
      if (!descend(level + 1, plus(got, questions[q]!.weight, g), now, narrowed)) return false;
    }
    return true;
  }

  function mostValue(forced: number, possible: number, masks: Int32Array): number {
    let most = 0;
    for (const v of bitsOf(possible)) {
      const top = mostIn(model.values[v]!, masks[v]!);
      most += (forced & (1 << v)) !== 0 ? top : Math.max(0, top);
    }
    for (const s of sharedOf(forced)) most -= problem.shared[s]!.nominalS;
    return most;
  }

  function finish(got: Worth, forced: number, masks: Int32Array): boolean {
    if (forced === 0) return true;
    const tiers = compareWorth({ ...got, value: 0 }, { ...best, value: 0 });
    if (tiers < 0) return true;
    const shared = sharedOf(forced);
    const sharedS = shared.reduce((sum, s) => sum + problem.shared[s]!.nominalS, 0);
    const times = shared.map((s) => model.sharedTimes[s]!);
    const fixed = spendAll(base, baseFromS, times, anything);
    searchPicks(
      model,
      {
        views: bitsOf(forced),
        allowed: masks,
        spent: fixed.curve.slice(),
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

  if (start !== undefined && start.some((pick) => pick !== -1)) record(start);
  if (base[slotS]! >= wanted - 1e-10) {
    descend(
      0,
      { diagnostic: 0, targeted: 0, screening: 0, value: 0 },
      0,
      Int32Array.from(model.everything),
    );
  }
  return { picks: bestPicks, nodes: Math.min(nodes, nodeLimit), complete: nodes <= nodeLimit };
}

function plus(worth: Worth, weight: number, grade: number): Worth {
  return {
    diagnostic: worth.diagnostic + (grade >= 3 ? weight : 0),
    targeted: worth.targeted + (grade >= 2 ? weight : 0),
    screening: worth.screening + (grade >= 1 ? weight : 0),
    value: worth.value,
  };
}

function compareWorth(a: Worth, b: Worth): number {
  return (
    a.diagnostic - b.diagnostic ||
    a.targeted - b.targeted ||
    a.screening - b.screening ||
    a.value - b.value
  );
}

function leastIn(values: readonly number[], mask: number): number {
  let least = Infinity;
  for (let c = 0; c < values.length; c++) {
    if ((mask & (1 << c)) !== 0 && values[c]! < least) least = values[c]!;
  }
  return least;
}

function mostIn(values: readonly number[], mask: number): number {
  let most = -Infinity;
  for (let c = 0; c < values.length; c++) {
    if ((mask & (1 << c)) !== 0 && values[c]! > most) most = values[c]!;
  }
  return most;
}

function sameMasks(a: Int32Array, b: Int32Array): boolean {
  return a.every((mask, i) => mask === b[i]);
}
