import { noonStep, type Ground, type SlotOption } from './fill-problem.js';

export type BoundTier = 'diagnostic' | 'targeted' | 'screening';

export interface UpperBound {
  readonly bound: number;
  /** What each request is worth beyond the scanner time it takes, at the best prices. */
  readonly requestPrices: readonly number[];
  /** What five minutes of each free stretch are worth, at the same prices. */
  readonly stepPrices: readonly number[];
}

/** Prices are multiples of this, so that sums of them are exact and the bound is a proof, not a rounding. */
const priceUnit = 1 / 1024;

/**
 * No filling can be worth more than this in one tier. Lagrangian relaxation (Geoffrion 1974) of "each request at most once":
 * every request gets a price, then each free stretch is filled on its own by a longest path over its five-minute steps. Any
 * prices give a true bound; subgradient steps (Held, Wolfe and Crowder 1974) look for good ones. The best prices give the
 * bound of the time-indexed linear programme, because a longest path has whole optima of its own.
 * Teams, coils and the order of tiers are left out, which can only raise the bound.
 *
 * @param reached a worth known to be reachable, for the step length only
 */
export function upperBound(
  ground: Ground,
  tier: BoundTier,
  reached: number,
  rounds = 400,
): UpperBound {
  const worth = (option: SlotOption) => option[tier];
  const count = ground.problem.waiting.length;
  const most = new Array<number>(count).fill(0);
  for (const line of ground.lines)
    line.windows.forEach((w, r) => {
      for (const option of w?.options ?? [])
        most[r] = Math.max(most[r]!, w!.factor * worth(option));
    });
  // Everybody served at their best is a bound already.
  const everybody = most.reduce((a, b) => a + b, 0);
  let found = Infinity;
  let bound = everybody;
  let best: readonly number[] = most;
  let prices = most.map((m) => Math.round(m / 2 / priceUnit) * priceUnit);
  let step = 1;
  let since = 0;
  let direction = new Array<number>(count).fill(0);
  const tables = lineTables(ground);
  for (let round = 0; round < rounds && Math.floor(bound + 1e-9) > reached; round++) {
    const { value, uses } = relaxed(ground, worth, prices, tables);
    if (value < found) {
      since = value < found * (1 - 1e-4) ? 0 : since + 1;
      found = value;
      bound = Math.min(everybody, found);
      best = prices;
    } else since++;
    if (since > patience) {
      step *= 0.7;
      since = 0;
      prices = [...best];
      direction = direction.fill(0);
      if (step < 1e-3) break;
      continue;
    }
    // The last directions are kept in part (Camerini, Fratta and Maffioli 1975): plain steps zigzag between requests.
    direction = direction.map((d, r) => kept * d + (1 - uses[r]!));
    const norm = direction.reduce((sum, d, r) => sum + (prices[r] === 0 && d > 0 ? 0 : d * d), 0);
    if (norm === 0) break;
    const length = (step * (value - Math.max(reached, 0.9 * Math.min(bound, value)))) / norm;
    prices = prices.map((u, r) => {
      const units = Math.round((u - length * direction[r]!) / priceUnit);
      return Math.max(0, Math.min(most[r]!, units * priceUnit));
    });
  }
  const { gains } = relaxed(ground, worth, best, tables);
  return {
    bound: Math.floor(bound + 1e-9),
    requestPrices: best,
    stepPrices: gains.map((gain, s) => {
      const { from, to } = ground.stretches[s]!;
      return gain / (to - from);
    }),
  };
}

/** Rounds without progress before steps become shorter, and the share of the last direction kept. */
const patience = 15;
const kept = 0.6;

interface LineTable {
  readonly longest: number;
}

function lineTables(ground: Ground): readonly LineTable[] {
  return ground.lines.map((line) => ({
    longest: Math.max(
      0,
      ...line.windows.flatMap((w) => (w === undefined ? [] : w.options.map((o) => o.steps))),
    ),
  }));
}

/** Worth of the relaxed problem under these prices, and how often it uses each request. */
function relaxed(
  ground: Ground,
  worth: (option: SlotOption) => number,
  prices: readonly number[],
  tables: readonly LineTable[],
): {
  readonly value: number;
  readonly uses: readonly number[];
  readonly gains: readonly number[];
} {
  const uses = new Array<number>(prices.length).fill(0);
  const gains = new Array<number>(ground.stretches.length).fill(0);
  let value = prices.reduce((a, b) => a + b, 0);
  ground.lines.forEach((line, l) => {
    const stretches = ground.ofLine[l] ?? [];
    if (stretches.length === 0) return;
    const { longest } = tables[l]!;
    // Best gain per length, before noon and from noon on.
    const gain = [new Float64Array(longest + 1), new Float64Array(longest + 1)];
    const who = [new Int32Array(longest + 1).fill(-1), new Int32Array(longest + 1).fill(-1)];
    line.windows.forEach((w, r) => {
      if (w === undefined) return;
      for (const option of w.options) {
        const g = w.factor * worth(option) - prices[r]!;
        if (g <= 0) continue;
        for (let half = 0; half < 2; half++) {
          const may = half === 0 ? w.release < noonStep : w.last >= noonStep;
          if (may && g > gain[half]![option.steps]!) {
            gain[half]![option.steps] = g;
            who[half]![option.steps] = r;
          }
        }
      }
    });
    for (const s of stretches) {
      const { from, to } = ground.stretches[s]!;
      const best = new Float64Array(to - from + 1);
      const pick = new Int32Array(to - from + 1);
      for (let t = to - 1; t >= from; t--) {
        const half = t < noonStep ? 0 : 1;
        let top = best[t + 1 - from]!;
        let length = 0;
        const room = Math.min(longest, to - t);
        for (let n = 1; n <= room; n++) {
          const g = gain[half]![n]!;
          if (g > 0 && g + best[t + n - from]! > top) {
            top = g + best[t + n - from]!;
            length = n;
          }
        }
        best[t - from] = top;
        pick[t - from] = length;
      }
      value += best[0]!;
      gains[s] = best[0]!;
      for (let t = from; t < to;) {
        const n = pick[t - from]!;
        if (n === 0) t++;
        else {
          uses[who[t < noonStep ? 0 : 1]![n]!]! += 1;
          t += n;
        }
      }
    }
  });
  return { value, uses, gains };
}
