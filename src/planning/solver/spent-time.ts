import type { Distribution } from '../distribution.js';

/**
 * Time as the solvers need it: sparse masses to add, a cumulative curve up to the slot to add them to, and
 * the stochastic order between times.
 */

/** P(T <= s) for s = 0..slot, seconds. */
export type Cumulative = Float64Array;

/** The mass points of a time, earliest first. */
export interface SparseTime {
  readonly atS: Int32Array;
  readonly mass: Float64Array;
  readonly leastS: number;
  readonly mostS: number;
}

export function sparseTime(d: Distribution): SparseTime {
  const points: number[] = [];
  for (let i = 0; i < d.p.length; i++) if (d.p[i]! > 0) points.push(i);
  return {
    atS: Int32Array.from(points, (i) => d.startS + i),
    mass: Float64Array.from(points, (i) => d.p[i]!),
    leastS: d.startS + points[0]!,
    mostS: d.startS + points[points.length - 1]!,
  };
}

/** Cumulative curve of a time on 0..slotS. */
export function cumulative(d: Distribution, slotS: number): Cumulative {
  const curve = new Float64Array(slotS + 1);
  let sum = 0;
  for (let s = 0; s <= slotS; s++) {
    sum += d.p[s - d.startS] ?? 0;
    curve[s] = sum;
  }
  return curve;
}

/** Seconds that times still to come can take together; only the curve from slot - mostS to slot - leastS matters then. */
export interface Ahead {
  readonly leastS: number;
  readonly mostS: number;
}

/**
 * Adds a time to a cumulative curve: `out[s]` = sum of mass(t) * curve[s - t], only where times still ahead can need it.
 * @param fromS first second where `curve` is above zero
 * @returns first second where `out` is above zero (possibly past its end)
 */
export function spend(
  curve: Cumulative,
  fromS: number,
  time: SparseTime,
  ahead: Ahead,
  out: Cumulative,
): number {
  const slotS = out.length - 1;
  const lowS = Math.max(0, slotS - ahead.mostS);
  const endS = slotS - ahead.leastS + 1;
  if (endS <= lowS) return fromS + time.leastS;
  out.fill(0, lowS, endS);
  const { atS, mass } = time;
  for (let k = 0; k < atS.length; k++) {
    const t = atS[k]!;
    const share = mass[k]!;
    for (let s = Math.max(lowS, fromS + t); s < endS; s++) out[s]! += share * curve[s - t]!;
  }
  return fromS + time.leastS;
}

/** P(curve's time + time <= slot), without building the whole curve. */
export function chanceAfter(curve: Cumulative, time: SparseTime): number {
  const slotS = curve.length - 1;
  let chance = 0;
  for (let k = 0; k < time.atS.length; k++) {
    const t = time.atS[k]!;
    if (t > slotS) break;
    chance += time.mass[k]! * curve[slotS - t]!;
  }
  return chance;
}

/** Whether `a` is stochastically no later than `b`: P(a <= s) >= P(b <= s) for every s. */
export function isNoLater(a: Distribution, b: Distribution): boolean {
  const endS = Math.max(a.startS + a.p.length, b.startS + b.p.length);
  let belowA = 0;
  let belowB = 0;
  for (let s = Math.min(a.startS, b.startS); s < endS; s++) {
    belowA += a.p[s - a.startS] ?? 0;
    belowB += b.p[s - b.startS] ?? 0;
    if (belowA < belowB - 1e-12) return false;
  }
  return true;
}

/** The latest time that is stochastically no later than any of the given: pointwise highest cumulative curve. */
export function earliestEnvelope(times: readonly Distribution[]): Distribution {
  const [only] = times;
  if (times.length === 1 && only !== undefined) return only;
  const startS = Math.min(...times.map((d) => d.startS));
  const endS = Math.max(...times.map((d) => d.startS + d.p.length));
  const p = new Float64Array(endS - startS);
  const below = times.map(() => 0);
  let highest = 0;
  for (let s = startS; s < endS; s++) {
    let here = highest;
    times.forEach((d, i) => {
      below[i]! += d.p[s - d.startS] ?? 0;
      here = Math.max(here, below[i]!);
    });
    p[s - startS] = here - highest;
    highest = here;
  }
  return { startS, p };
}

/**
 * Certainty equivalent of a time at rate theta per second: -ln E[exp(-theta T)] / theta. Additive over
 * independent times, between the least value (theta large) and the mean (theta near 0); for theta below
 * zero between the mean and the greatest value.
 */
export function equivalentS(time: SparseTime, theta: number): number {
  if (theta === Infinity) return time.leastS;
  const step = Math.exp(-theta);
  let factor = 1;
  let atS = time.leastS;
  let sum = 0;
  for (let k = 0; k < time.atS.length; k++) {
    const gapS = time.atS[k]! - atS;
    factor *= gapS <= 1 ? (gapS === 1 ? step : 1) : Math.exp(-theta * gapS);
    atS += gapS;
    sum += time.mass[k]! * factor;
  }
  return time.leastS - Math.log(sum) / theta;
}

/**
 * Room left after the curve's time, in the additive measure of `equivalentS`: for independent times R within
 * `ahead`, P(curve's time + R <= slot) >= confidence implies equivalent(R) <= room.
 * Method: F(slot - r) <= K exp(-theta r) for all r that R can take, hence the chance is at most
 * K E[exp(-theta R)] (the exponential bound of Chernoff 1952, turned into a necessary condition).
 */
export function roomS(
  curve: Cumulative,
  fromS: number,
  confidence: number,
  theta: number,
  ahead: Ahead,
): number {
  const slotS = curve.length - 1;
  const lastS = Math.min(ahead.mostS, slotS - fromS);
  if (ahead.leastS > lastS) return -Infinity;
  if (theta === Infinity) {
    let r = ahead.leastS;
    if (curve[slotS - r]! < confidence) return -Infinity;
    while (r < lastS && curve[slotS - r - 1]! >= confidence) r++;
    return r;
  }
  let highest = 0;
  const step = Math.exp(theta);
  let growth = Math.exp(theta * ahead.leastS);
  for (let r = ahead.leastS; r <= lastS; r++) {
    const bound = curve[slotS - r]! * growth;
    if (bound > highest) highest = bound;
    growth *= step;
  }
  return highest === 0 ? -Infinity : Math.log(highest / confidence) / theta;
}

/**
 * The counterpart that suffices: for any independent time R, equivalent(R) at `-theta` <= sure room implies
 * P(curve's time + R <= slot) >= confidence. Method: 1 - F(slot - r) <= K exp(theta r) for all r >= 0
 * (the same exponential bound from the other side).
 */
export function sureRoomS(curve: Cumulative, confidence: number, theta: number): number {
  const slotS = curve.length - 1;
  const step = Math.exp(-theta);
  let shrink = 1;
  let highest = 0;
  for (let r = 0; r <= slotS; r++) {
    const bound = (1 - curve[slotS - r]!) * shrink;
    if (bound > highest) highest = bound;
    shrink *= step;
  }
  return Math.log((1 - confidence) / Math.max(highest, shrink)) / theta;
}
