import type { Packing } from './fill-packing.js';

/** A request, a room and an offer it could have there. */
export interface Draw {
  readonly request: Int32Array;
  readonly room: Int32Array;
  readonly option: Int32Array;
  /** Sums of the weights so far. */
  readonly upTo: Float64Array;
}

/** Prices of the bound: what a request and five minutes of a stretch are worth. */
export interface Prices {
  readonly requestPrices: readonly number[];
  readonly stepPrices: readonly number[];
}

/**
 * All places that requests could have, weighted by what is lost against the best prices: hardly anything that loses much at
 * them is in a good filling (the idea of fixing by reduced cost, Dantzig, Fulkerson and Johnson 1954, as odds and not as a
 * rule).
 *
 * @param loss worth at which the odds fall to 1/e
 */
export function drawFrom(packing: Packing, prices: Prices, loss: number): Draw {
  const request: number[] = [];
  const room: number[] = [];
  const option: number[] = [];
  const upTo: number[] = [];
  const { steps, value } = packing.table;
  let sum = 0;
  for (let r = 0; r < packing.where.length; r++)
    packing.rooms.forEach(({ stretch }, m) => {
      for (let o = packing.firstOption(r, m); o < packing.endOption(r, m); o++) {
        if (!packing.canEver(r, m, o)) continue;
        const kept = value[o]! - prices.stepPrices[stretch]! * steps[o]!;
        sum += Math.exp(-Math.max(0, prices.requestPrices[r]! - kept) / loss) + leastOdds;
        request.push(r);
        room.push(m);
        option.push(o);
        upTo.push(sum);
      }
    });
  return {
    request: Int32Array.from(request),
    room: Int32Array.from(room),
    option: Int32Array.from(option),
    upTo: Float64Array.from(upTo),
  };
}

const leastOdds = 1e-4;

/** Number of one place, by its odds; -1 when there is none. */
export function drawOne({ upTo }: Draw, random: () => number): number {
  if (upTo.length === 0) return -1;
  const at = random() * upTo[upTo.length - 1]!;
  let low = 0;
  let high = upTo.length - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (upTo[middle]! > at) high = middle;
    else low = middle + 1;
  }
  return low;
}
