import type { Prices } from './fill-draw.js';
import { spotValue } from './fill-objective.js';
import type { Ground } from './fill-problem.js';

/** What is known of each request before the search: the best it could get anywhere, in all and per step, and its length. */
export interface SearchTables extends Prices {
  readonly top: readonly number[];
  readonly perStep: readonly number[];
  readonly length: readonly number[];
  /** Mean of the tops: the scale on which answers differ. */
  readonly scale: number;
  /** Worth of a step of scanner time, about. */
  readonly density: number;
}

export function tablesOf(ground: Ground, { requestPrices, stepPrices }: Prices): SearchTables {
  const top: number[] = [];
  const perStep: number[] = [];
  const length: number[] = [];
  ground.problem.waiting.forEach((_, r) => {
    let best = 0;
    let steps = 1;
    let ratio = 0;
    for (const stretch of ground.stretches) {
      const w = ground.lines[stretch.line]!.windows[r];
      for (const o of w?.options ?? []) {
        const v = spotValue(o, w!.factor);
        if (o.steps > stretch.to - stretch.from) continue;
        ratio = Math.max(ratio, v / o.steps);
        if (v > best) {
          best = v;
          steps = o.steps;
        }
      }
    }
    top.push(best);
    perStep.push(ratio);
    length.push(steps);
  });
  const sum = (list: readonly number[]) => list.reduce((a, b) => a + b, 0);
  return {
    ...{ top, perStep, length, requestPrices, stepPrices },
    scale: Math.max(1e-3, sum(top) / Math.max(1, top.length)),
    density: sum(top) / Math.max(1, sum(length)),
  };
}

/** By what the requests that wait are taken in turn: chance, worth, worth per step, length. */
export function orderKey(tables: SearchTables, random: () => number): readonly number[] {
  const kind = Math.floor(random() * (tables.requestPrices === undefined ? 4 : 6));
  if (kind === 0) return tables.top.map(() => random());
  const list =
    kind === 1
      ? tables.top
      : kind === 2
        ? tables.perStep
        : kind === 3
          ? tables.length
          : tables.requestPrices!;
  return list.map((v) => v * (0.8 + 0.4 * random()));
}
