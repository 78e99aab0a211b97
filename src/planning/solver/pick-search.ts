import { bitsOf, rates, type Compiled } from './compiled.js';
import { chanceTolerance } from './judge.js';
import { chanceAfter, roomS, spend, type Ahead, type Cumulative } from './spent-time.js';

/** One set of views that all have to be run, each with the candidates that keep the grades. */
export interface PickTask {
  /** View indices. */
  readonly views: readonly number[];
  /** Candidates allowed, bit mask per view of the problem. */
  readonly allowed: Int32Array;
  /** Cumulative curve of everything already fixed (base and shared times), 0..slot. */
  readonly spent: Cumulative;
  readonly spentFromS: number;
  /** Nominal seconds left for the views by the stay limit. */
  readonly nominalLeftS: number;
  /** Only values above this are of interest. */
  readonly above: number;
}

export interface PickSearch {
  /** Called with the picks per view of the problem (-1 none) whenever a better value is found. */
  readonly found: (picks: number[], value: number) => void;
  /** Whether a chance this close to the confidence really holds. */
  readonly settle: (picks: number[], chance: number) => boolean;
  /** Counts a node; false when the search has to stop. */
  readonly step: () => boolean;
}

/**
 * Highest sum of values over one candidate per view whose time still fits the slot with the confidence: depth
 * first, bounded by a multiple-choice knapsack over the views left (dynamic programme, Dudzinski
 * and Walukiewicz 1987) in which random times are replaced by their certainty equivalents.
 */
export function searchPicks(model: Compiled, task: PickTask, search: PickSearch): void {
  const { confidence } = model.problem;
  const order = [...task.views].sort((a, b) => spreadS(model, b) - spreadS(model, a) || a - b);
  const depth = order.length;
  const options = order.map((v) =>
    bitsOf(task.allowed[v]!).sort((a, b) => model.values[v]![b]! - model.values[v]![a]! || a - b),
  );
  const nominal = (i: number, c: number) => model.problem.views[order[i]!]!.candidates[c]!.nominalS;
  const leastNominalAfter = suffixSums(options, (i, c) => nominal(i, c), Math.min);
  const leastTimeAfter = suffixSums(
    options,
    (i, c) => model.times[order[i]!]![c]!.leastS,
    Math.min,
  );
  const mostTimeAfter = suffixSums(options, (i, c) => model.times[order[i]!]![c]!.mostS, Math.max);
  const ahead: Ahead[] = leastTimeAfter.map((leastS, i) => ({ leastS, mostS: mostTimeAfter[i]! }));
  const slotS = task.spent.length - 1;
  const bounds = [0, tightestRate(model, task, order, options, ahead[0]!)].map((rate) => ({
    rate,
    table: knapsackTable(model, order, options, rate, slotS),
  }));
  const curves = Array.from({ length: depth }, () => new Float64Array(slotS + 1));
  const picks = model.problem.views.map(() => -1);
  let above = task.above;
  const wanted = confidence - chanceTolerance;

  const mostAfter = (level: number, curve: Cumulative, fromS: number): number => {
    let most = Infinity;
    for (const { rate, table } of bounds) {
      const room = roomS(curve, fromS, wanted - 1e-9, rates[rate]!, ahead[level]!);
      const value = table.most(level, room);
      if (value < most) most = value;
      if (most === -Infinity) break;
    }
    return most;
  };

  const descend = (
    level: number,
    curve: Cumulative,
    fromS: number,
    value: number,
    usedS: number,
  ): boolean => {
    const v = order[level]!;
    for (const c of options[level]!) {
      if (!search.step()) return false;
      const next = value + model.values[v]![c]!;
      const nominalS = usedS + nominal(level, c);
      if (nominalS + leastNominalAfter[level + 1]! > task.nominalLeftS) continue;
      if (level === depth - 1) {
        if (next <= above) break;
        const chance = chanceAfter(curve, model.times[v]![c]!);
        if (chance < wanted - 1e-10) continue;
        picks[v] = c;
        if (chance > wanted + 1e-10 || search.settle([...picks], chance)) {
          above = next;
          search.found([...picks], next);
        }
        continue;
      }
      const out = curves[level]!;
      const outFromS = spend(curve, fromS, model.times[v]![c]!, ahead[level + 1]!, out);
      if (next + mostAfter(level + 1, out, outFromS) <= above) continue;
      picks[v] = c;
      if (!descend(level + 1, out, outFromS, next, nominalS)) return false;
    }
    picks[v] = -1;
    return true;
  };
  if (depth > 0 && mostAfter(0, task.spent, task.spentFromS) > above) {
    descend(0, task.spent, task.spentFromS, 0, 0);
  }
}

function spreadS(model: Compiled, view: number): number {
  const nominal = model.problem.views[view]!.candidates.map((c) => c.nominalS);
  return Math.max(...nominal) - Math.min(...nominal);
}

function suffixSums(
  options: readonly (readonly number[])[],
  of: (level: number, candidate: number) => number,
  pick: (...values: number[]) => number,
): number[] {
  const sums = new Array<number>(options.length + 1).fill(0);
  for (let i = options.length - 1; i >= 0; i--) {
    sums[i] = sums[i + 1]! + pick(...options[i]!.map((c) => of(i, c)));
  }
  return sums;
}

/** Index of the rate that leaves the least room for a typical choice. */
function tightestRate(
  model: Compiled,
  task: PickTask,
  order: readonly number[],
  options: readonly (readonly number[])[],
  ahead: Ahead,
): number {
  let best = 1;
  let tightest = Infinity;
  for (let k = 1; k < rates.length; k++) {
    const confidence = model.problem.confidence - 2 * chanceTolerance;
    const room = roomS(task.spent, task.spentFromS, confidence, rates[k]!, ahead);
    let typical = 0;
    order.forEach((v, i) => {
      const sum = options[i]!.reduce((total, c) => total + model.equivalents[k]![v]![c]!, 0);
      typical += sum / options[i]!.length;
    });
    if (room / typical < tightest) {
      tightest = room / typical;
      best = k;
    }
  }
  return best;
}

/** Best value of the views from a level on, by room left; times rounded down to whole units, so it never errs low. */
function knapsackTable(
  model: Compiled,
  order: readonly number[],
  options: readonly (readonly number[])[],
  rate: number,
  slotS: number,
): { readonly most: (level: number, room: number) => number } {
  const unitS = Math.max(1, slotS / 600);
  const size = Math.floor(slotS / unitS) + 1;
  const rows = Array.from({ length: order.length + 1 }, () => new Float64Array(size));
  for (let i = order.length - 1; i >= 0; i--) {
    const row = rows[i]!.fill(-Infinity);
    const after = rows[i + 1]!;
    for (const c of options[i]!) {
      const units = Math.floor(model.equivalents[rate]![order[i]!]![c]! / unitS);
      const value = model.values[order[i]!]![c]!;
      for (let u = units; u < size; u++) {
        const sum = value + after[u - units]!;
        if (sum > row[u]!) row[u] = sum;
      }
    }
  }
  return {
    most: (level, room) => {
      const unit = Math.min(size - 1, Math.floor(room / unitS + 1e-6));
      return unit < 0 ? -Infinity : rows[level]![unit]!;
    },
  };
}
