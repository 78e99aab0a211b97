import { noonStep, type Ground, type SlotOption } from './fill-problem.js';

/** A line's offers in flat lists, and its stretches: read hundreds of times with other prices. */
export interface PathTable {
  readonly request: Int32Array;
  readonly steps: Int32Array;
  readonly worth: Float64Array;
  /** 1: may start before noon, 2: from noon on, 3: either. */
  readonly halves: Int8Array;
  readonly longest: number;
  readonly stretches: readonly {
    readonly number: number;
    readonly from: number;
    readonly to: number;
  }[];
}

export interface Relaxed {
  readonly value: number;
  /** How often each request is used. */
  readonly uses: Int32Array;
  /** Worth of each stretch beyond the prices. */
  readonly gains: Float64Array;
}

export function pathTables(
  ground: Ground,
  worth: (option: SlotOption) => number,
): readonly PathTable[] {
  return ground.lines.map((line, l): PathTable => {
    const offers = line.windows.flatMap((w, r) =>
      (w?.options ?? []).map((option) => ({
        ...{ r, steps: option.steps, worth: w!.factor * worth(option) },
        halves: (w!.release < noonStep ? 1 : 0) + (w!.last >= noonStep ? 2 : 0),
      })),
    );
    return {
      request: Int32Array.from(offers, (o) => o.r),
      steps: Int32Array.from(offers, (o) => o.steps),
      worth: Float64Array.from(offers, (o) => o.worth),
      halves: Int8Array.from(offers, (o) => o.halves),
      longest: offers.reduce((m, o) => Math.max(m, o.steps), 0),
      stretches: (ground.ofLine[l] ?? []).map((number) => ({
        ...ground.stretches[number]!,
        number,
      })),
    };
  });
}

/**
 * Worth of the relaxed problem under these prices: each free stretch filled on its own by a longest path over its
 * five-minute steps.
 */
export function relaxed(tables: readonly PathTable[], prices: readonly number[]): Relaxed {
  const stretches = tables.reduce((n, t) => n + t.stretches.length, 0);
  const uses = new Int32Array(prices.length);
  const gains = new Float64Array(stretches);
  let value = prices.reduce((a, b) => a + b, 0);
  for (const table of tables) {
    if (table.stretches.length === 0) continue;
    const halves = [1, 2].map((half) => bestPerLength(table, prices, half)) as [Half, Half];
    for (const { number, from, to } of table.stretches) {
      gains[number] = longestPath(halves, from, to, uses);
      value += gains[number]!;
    }
  }
  return { value, uses, gains };
}

/** Lengths worth something in one half of the day: steps, best gain, who gives it. */
interface Half {
  readonly steps: readonly number[];
  readonly gain: readonly number[];
  readonly who: readonly number[];
}

function bestPerLength(table: PathTable, prices: readonly number[], half: number): Half {
  const gain = new Float64Array(table.longest + 1);
  const who = new Int32Array(table.longest + 1);
  const { request, steps, worth, halves } = table;
  for (let i = 0; i < request.length; i++) {
    const own = worth[i]! - prices[request[i]!]!;
    if (own <= gain[steps[i]!]! || (halves[i]! & half) === 0) continue;
    gain[steps[i]!] = own;
    who[steps[i]!] = request[i]!;
  }
  // A length that gains no more than a shorter one is never needed.
  const lengths: number[] = [];
  let most = 0;
  for (let n = 1; n <= table.longest; n++) {
    if (gain[n]! <= most) continue;
    most = gain[n]!;
    lengths.push(n);
  }
  return { steps: lengths, gain: lengths.map((n) => gain[n]!), who: lengths.map((n) => who[n]!) };
}

function longestPath(halves: readonly [Half, Half], from: number, to: number, uses: Int32Array) {
  const best = new Float64Array(to - from + 1);
  const pick = new Int32Array(to - from + 1);
  for (let t = to - 1; t >= from; t--) {
    const { steps, gain } = halves[t < noonStep ? 0 : 1];
    let top = best[t + 1 - from]!;
    let chosen = -1;
    for (let i = 0; i < steps.length && steps[i]! <= to - t; i++) {
      const total = gain[i]! + best[t + steps[i]! - from]!;
      if (total > top) {
        top = total;
        chosen = i;
      }
    }
    best[t - from] = top;
    pick[t - from] = chosen;
  }
  for (let t = from; t < to;) {
    const { steps, who } = halves[t < noonStep ? 0 : 1];
    const i = pick[t - from]!;
    if (i >= 0) uses[who[i]!]! += 1;
    t += i < 0 ? 1 : steps[i]!;
  }
  return best[0]!;
}
