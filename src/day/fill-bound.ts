import type { Ground, SlotOption } from './fill-problem.js';
import { pathTables, relaxed } from './fill-paths.js';

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
 * @param reached a worth known to be reachable, for the step length and to end when the bound meets it
 * @param from request prices to begin with, of an earlier bound of the same tier
 */
export function upperBound(
  ground: Ground,
  tier: BoundTier,
  reached: number,
  rounds = 400,
  from?: readonly number[],
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
  let prices = from ?? most.map((m) => Math.round(m / 2 / priceUnit) * priceUnit);
  let step = 1;
  let since = 0;
  let direction = new Array<number>(count).fill(0);
  const tables = pathTables(ground, worth);
  for (let round = 0; round < rounds && Math.floor(bound + 1e-9) > reached; round++) {
    const { value, uses } = relaxed(tables, prices);
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
  const { gains } = relaxed(tables, best);
  return {
    bound: Math.floor(bound + 1e-9),
    requestPrices: best,
    stepPrices: ground.stretches.map((stretch, s) => gains[s]! / (stretch.to - stretch.from)),
  };
}

/** Rounds without progress before steps become shorter, and the share of the last direction kept. */
const patience = 15;
const kept = 0.6;
