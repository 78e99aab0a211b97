import { ProblemError } from '../shared/index.js';

/**
 * Probability mass on whole seconds. `p[i]` is P(T = startS + i); the masses sum to 1. Sums of
 * independent times are exact convolutions, so the chance to end inside a slot is not a guess.
 */
export interface Distribution {
  readonly startS: number;
  readonly p: Float64Array;
}

/** Mass below this at either end is folded into the last second kept: nothing is lost. */
const negligibleTail = 1e-12;

/** All mass at `s` seconds; a fraction is split over the two neighbouring seconds so that the mean is kept. */
export function atSeconds(s: number): Distribution {
  demand(Number.isFinite(s) && s >= 0, 'a time', `${s} s`, 'a number of seconds, 0 or more');
  const startS = Math.floor(s);
  const fraction = s - startS;
  return fraction === 0
    ? { startS, p: Float64Array.of(1) }
    : { startS, p: Float64Array.of(1 - fraction, fraction) };
}

/** One of several distributions, each with the probability of its weight; weights are scaled to sum 1. */
export function mixture(
  parts: readonly { readonly weight: number; readonly of: Distribution }[],
): Distribution {
  const used = parts.filter(({ weight }) => weight !== 0);
  const total = used.reduce((sum, { weight }) => sum + weight, 0);
  const sound = used.every(({ weight }) => weight > 0) && total > 0 && Number.isFinite(total);
  demand(sound, 'weights of a mixture', parts.map((x) => x.weight).join(', '), 'all >= 0, one > 0');
  const startS = Math.min(...used.map(({ of }) => of.startS));
  const endS = Math.max(...used.map(({ of }) => of.startS + of.p.length));
  const p = new Float64Array(endS - startS);
  for (const { weight, of } of used) {
    const shift = of.startS - startS;
    for (let i = 0; i < of.p.length; i++) p[i + shift]! += (weight / total) * of.p[i]!;
  }
  return { startS, p };
}

/** Sum of two independent times: exact, no mass lost. */
export function convolve(a: Distribution, b: Distribution): Distribution {
  const [sparse, dense] = massPoints(a) <= massPoints(b) ? [a, b] : [b, a];
  const p = new Float64Array(a.p.length + b.p.length - 1);
  for (let i = 0; i < sparse.p.length; i++) {
    const share = sparse.p[i]!;
    if (share === 0) continue;
    for (let j = 0; j < dense.p.length; j++) p[i + j]! += share * dense.p[j]!;
  }
  return foldTails({ startS: a.startS + b.startS, p });
}

/**
 * The same time on multiples of `stepS` seconds only: each mass is split over the two multiples around
 * it so that the mean is kept. Earlier times stay earlier in the stochastic order on one step; the
 * variance grows by at most a quarter of the step squared. A wide time on few points is added to
 * others many times faster.
 */
export function coarsened(d: Distribution, stepS: number): Distribution {
  demand(Number.isInteger(stepS) && stepS >= 1, 'a step', `${stepS} s`, 'whole seconds, 1 or more');
  if (stepS === 1) return d;
  const startS = stepS * Math.floor(d.startS / stepS);
  const steps = Math.ceil((d.startS + d.p.length - 1 - startS) / stepS);
  const p = new Float64Array(steps * stepS + 1);
  for (let i = 0; i < d.p.length; i++) {
    const offset = d.startS + i - startS;
    const below = stepS * Math.floor(offset / stepS);
    const share = (offset - below) / stepS;
    p[below]! += d.p[i]! * (1 - share);
    if (share > 0) p[below + stepS]! += d.p[i]! * share;
  }
  return { startS, p };
}

/** `unitS` times a binomial count: how long the repeats of `trials` pieces take, each retaken at most once. */
export function repeats(trials: number, chance: number, unitS: number): Distribution {
  demand(
    Number.isInteger(trials) && trials >= 0,
    'pieces',
    `${trials}`,
    'a whole number, 0 or more',
  );
  demand(chance >= 0 && chance <= 1, 'chance of a repeat', `${chance}`, 'between 0 and 1');
  if (trials === 0 || chance === 0) return atSeconds(0);
  // One piece at a time: P(k of n) = P(k of n-1)(1-c) + P(k-1 of n-1)c, stable for every chance.
  let counts = Float64Array.of(1);
  for (let n = 1; n <= trials; n++) {
    const next = new Float64Array(n + 1);
    for (let k = 0; k < n; k++) {
      next[k]! += counts[k]! * (1 - chance);
      next[k + 1]! += counts[k]! * chance;
    }
    counts = next;
  }
  return foldTails(
    mixture([...counts].map((weight, count) => ({ weight, of: atSeconds(count * unitS) }))),
  );
}

/**
 * Lognormal time with the given mean and coefficient of variation (standard deviation / mean), on whole
 * seconds. The density is weighed with a hat one second to either side, as `atSeconds` does, so the mean
 * is kept; tails of 1e-6 are cut and the rest is renormalised.
 */
export function lognormal(meanS: number, coefficientOfVariation: number): Distribution {
  const cv = coefficientOfVariation;
  demand(Number.isFinite(cv) && cv >= 0, 'a coefficient of variation', `${cv}`, '0 or more');
  if (cv === 0 || meanS === 0) return atSeconds(meanS);
  demand(Number.isFinite(meanS) && meanS > 0, 'a mean time', `${meanS} s`, 'a number of seconds');
  const sigma = Math.sqrt(Math.log1p(cv * cv));
  const mu = Math.log(meanS) - (sigma * sigma) / 2;
  const startS = Math.max(0, Math.floor(Math.exp(mu - tailSigmas * sigma)));
  const endS = Math.ceil(Math.exp(mu + tailSigmas * sigma));
  // E[min(T, t)]; its second difference is the mass under the hat around t.
  const limitedMeanS = (t: number): number => {
    if (t <= 0) return t;
    const z = (Math.log(t) - mu) / sigma;
    return meanS * normalBelow(z - sigma) + t * normalBelow(-z);
  };
  const p = new Float64Array(endS - startS + 1);
  let before = limitedMeanS(startS - 1);
  let here = limitedMeanS(startS);
  let total = 0;
  for (let i = 0; i < p.length; i++) {
    const after = limitedMeanS(startS + i + 1);
    p[i] = Math.max(0, 2 * here - before - after);
    total += p[i]!;
    before = here;
    here = after;
  }
  for (let i = 0; i < p.length; i++) p[i]! /= total;
  return foldTails({ startS, p });
}

/** Standard normal quantile of 1 - 1e-6. */
const tailSigmas = 4.753424;

/**
 * Standard normal P(Z <= z), to about 1e-15: the all-positive series below 3 and the continued fraction
 * above. Source: Abramowitz and Stegun 1964, 26.2.11 and 26.2.14.
 */
function normalBelow(z: number): number {
  const x = Math.abs(z);
  const density = Math.exp((-x * x) / 2) / Math.sqrt(2 * Math.PI);
  if (x < 3) {
    let term = x;
    let sum = x;
    for (let n = 3; term > sum * 1e-17; n += 2) {
      term *= (x * x) / n;
      sum += term;
    }
    return z < 0 ? 0.5 - density * sum : 0.5 + density * sum;
  }
  let fraction = x;
  for (let n = 60; n > 0; n--) fraction = x + n / fraction;
  return z < 0 ? density / fraction : 1 - density / fraction;
}

/** Mean, seconds. */
export function meanS(d: Distribution): number {
  let mean = 0;
  for (let i = 0; i < d.p.length; i++) mean += i * d.p[i]!;
  return d.startS + mean;
}

/** P(T <= limitS). */
export function chanceWithin(d: Distribution, limitS: number): number {
  const last = Math.min(d.p.length - 1, Math.floor(limitS) - d.startS);
  if (last < 0) return 0;
  if (last === d.p.length - 1) return 1;
  let chance = 0;
  for (let i = 0; i <= last; i++) chance += d.p[i]!;
  return Math.min(1, chance);
}

/** Least whole second t with P(T <= t) >= p, up to rounding of 1e-12. */
export function quantileS(d: Distribution, p: number): number {
  demand(p >= 0 && p <= 1, 'a probability', `${p}`, 'between 0 and 1');
  let chance = 0;
  for (let i = 0; i < d.p.length; i++) {
    chance += d.p[i]!;
    if (chance >= p - 1e-12) return d.startS + i;
  }
  return d.startS + d.p.length - 1;
}

function massPoints(d: Distribution): number {
  let points = 0;
  for (const mass of d.p) if (mass !== 0) points++;
  return points;
}

function foldTails(d: Distribution): Distribution {
  let first = 0;
  let below = 0;
  while (first < d.p.length - 1 && below + d.p[first]! < negligibleTail) below += d.p[first++]!;
  let last = d.p.length - 1;
  let above = 0;
  while (last > first && above + d.p[last]! < negligibleTail) above += d.p[last--]!;
  const p = d.p.slice(first, last + 1);
  p[0]! += below;
  p[p.length - 1]! += above;
  return { startS: d.startS + first, p };
}

function demand(holds: boolean, thing: string, value: string, limit: string): void {
  if (holds) return;
  throw new ProblemError({
    code: 'unusable-distribution',
    thing,
    value,
    limit: `expected ${limit}`,
    wayOut: 'Correct the duration or chance it was computed from.',
  });
}
