import { bitsOf, rates, sureRates, type Compiled } from './compiled.js';
import { chanceTolerance } from './judge.js';
import {
  chanceAfter,
  cumulative,
  equivalentS,
  roomS,
  spend,
  sureRoomS,
  type Ahead,
  type Cumulative,
  type SparseTime,
} from './spent-time.js';
import { sharedOf } from './worth.js';

/** Answers whether a set of forced views can still fit slot and stay, and adds up time. */
export interface Fit {
  /** Cheap necessary conditions: additive time at several rates, nominal stay. */
  readonly may: (forced: number, masks: Int32Array) => boolean;
  /** The exact necessary condition: the earliest envelopes of all forced views together reach the confidence. */
  readonly earliest: (forced: number, masks: Int32Array) => boolean;
  /** Base and the shared times of these views on 0..slot. */
  readonly fixed: (forced: number) => { readonly curve: Cumulative; readonly fromS: number };
  /** Whether the base alone leaves any room. */
  readonly base: boolean;
}

interface Additive {
  readonly roomS: number;
  readonly candidates: readonly (readonly number[])[];
  readonly shared: readonly number[];
}

export function fitFor(model: Compiled, slotS: number): Fit {
  const { problem } = model;
  const { confidence } = problem;
  const wanted = confidence - chanceTolerance;
  const base = cumulative(problem.base, slotS);
  const baseFromS = problem.base.startS;
  const anything: Ahead = { leastS: 0, mostS: slotS };
  const quick: Additive[] = rates.map((rate, k) => ({
    roomS: roomS(base, baseFromS, wanted - 1e-9, rate, anything) + 1e-6,
    candidates: model.equivalents[k]!,
    shared: model.sharedTimes.map((time) => equivalentS(time, rate)),
  }));
  const sure: Additive[] = sureRates.map((rate, k) => ({
    roomS: sureRoomS(base, confidence, rate) - 1e-6,
    candidates: model.sureEquivalents[k]!,
    shared: model.sharedTimes.map((time) => equivalentS(time, -rate)),
  }));
  const nominals = problem.views.map((view) => view.candidates.map((c) => c.nominalS));
  const curves = [new Float64Array(slotS + 1), new Float64Array(slotS + 1)] as const;

  /** Adds times one after the other to the base; `ahead` is what may follow all of them. */
  function spendAll(times: readonly SparseTime[], ahead: Ahead) {
    let leastS = times.reduce((sum, time) => sum + time.leastS, ahead.leastS);
    let mostS = times.reduce((sum, time) => sum + time.mostS, ahead.mostS);
    let curve = base;
    let fromS = baseFromS;
    for (const time of times) {
      leastS -= time.leastS;
      mostS -= time.mostS;
      const out = curve === curves[0] ? curves[1] : curves[0];
      fromS = spend(curve, fromS, time, { leastS, mostS }, out);
      curve = out;
    }
    return { curve, fromS };
  }

  return {
    base: base[slotS]! >= wanted - 1e-10,
    may: (forced, masks) => {
      const members = bitsOf(forced);
      const shared = sharedOf(model, forced);
      let stayS = problem.baseNominalS;
      for (const s of shared) stayS += problem.shared[s]!.nominalS;
      for (const v of members) stayS += leastIn(nominals[v]!, masks[v]!);
      if (stayS > problem.stayLimitS) return false;
      return quick.every((table) => leastTime(table, shared, members, masks) <= table.roomS);
    },
    earliest: (forced, masks) => {
      const shared = sharedOf(model, forced);
      const members = bitsOf(forced);
      if (sure.some((table) => leastTime(table, shared, members, masks) <= table.roomS))
        return true;
      const times = [
        ...shared.map((s) => model.sharedTimes[s]!),
        ...members.map((v) => model.envelope(v, masks[v]!)),
      ].sort((a, b) => a.atS.length - b.atS.length);
      // The widest comes last, where only one value of the sum is needed.
      const last = times.pop();
      if (last === undefined) return true;
      return chanceAfter(spendAll(times, last).curve, last) >= wanted - 1e-10;
    },
    fixed: (forced) => {
      const times = sharedOf(model, forced).map((s) => model.sharedTimes[s]!);
      const { curve, fromS } = spendAll(times, anything);
      return { curve: curve.slice(), fromS };
    },
  };
}

/** Least sum of additive times: the shared parts and one allowed candidate per view, seconds. */
function leastTime(
  table: Additive,
  shared: readonly number[],
  members: readonly number[],
  masks: Int32Array,
): number {
  let timeS = 0;
  for (const s of shared) timeS += table.shared[s]!;
  for (const v of members) timeS += leastIn(table.candidates[v]!, masks[v]!);
  return timeS;
}

function leastIn(values: readonly number[], mask: number): number {
  let least = Infinity;
  for (let c = 0; c < values.length; c++) {
    if ((mask & (1 << c)) !== 0 && values[c]! < least) least = values[c]!;
  }
  return least;
}
