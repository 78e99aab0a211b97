import { bitsOf, type Compiled } from './compiled.js';
import type { Fit } from './fit.js';

/** Candidates, at most one a view, of which not one per view of `views` can be run together within the slot. */
export interface CoverCut {
  /** Bit mask of views. */
  readonly views: number;
  /** Candidates per view, bit masks. */
  readonly candidates: Int32Array;
}

/**
 * A set of picks that misses the slot, made as strong as one pass allows: views that are not needed to miss it are
 * dropped, then every candidate is taken in with which even the earliest envelope still misses it.
 * Adding a sequence or exchanging one for a later one only makes time later, so every allowed answer leaves at
 * least one of the views of the cut without a candidate of it. Method: lifted cover inequalities (Balas 1975).
 * @param candidates to start from, bit mask per view; unused views 0
 * @returns undefined when the set does not miss the slot beyond rounding
 */
export function coverCut(
  model: Compiled,
  fit: Fit,
  views: number,
  candidates: Int32Array,
): CoverCut | undefined {
  const misses = (some: number, masks: Int32Array): boolean =>
    !(fit.may(some, masks) && fit.earliest(some, masks));
  const masks = candidates.slice();
  if (views === 0 || !misses(views, masks)) return undefined;
  const leastS = (v: number): number =>
    Math.min(...bitsOf(masks[v]!).map((c) => model.times[v]![c]!.leastS));
  let needed = views;
  for (const v of bitsOf(views).sort((a, b) => leastS(a) - leastS(b))) {
    const fewer = needed & ~(1 << v);
    if (fewer !== 0 && misses(fewer, masks)) needed = fewer;
  }
  for (const v of bitsOf(needed)) {
    const others = bitsOf(model.everything[v]! & ~masks[v]!).sort(
      (a, b) => model.times[v]![b]!.leastS - model.times[v]![a]!.leastS,
    );
    for (const c of others) {
      const before = masks[v]!;
      masks[v] = before | (1 << c);
      if (!misses(needed, masks)) masks[v] = before;
    }
  }
  return { views: needed, candidates: masks };
}
