import type { Followed } from './kaplan-meier.js';

/** Two groups compared over their whole curves. Observed and expected are the first group's. */
export interface LogRank {
  readonly observed: number;
  readonly expected: number;
  readonly variance: number;
  /** (observed - expected)^2 / variance; 0 where the groups cannot be told apart at all. */
  readonly chiSquare: number;
  /** Chance of a chi-square this large when both curves are the same. */
  readonly chance: number;
}

/**
 * Two-sample log-rank test (Mantel, Cancer Chemother Rep 1966;50:163; Peto and Peto 1972): at every time with events,
 * those expected in the first group if both had the same curve, with the hypergeometric variance.
 */
export function logRank(first: readonly Followed[], second: readonly Followed[]): LogRank {
  const both = [...first, ...second];
  const times = [...new Set(both.filter((f) => !f.censored).map((f) => f.time))];
  let observed = 0;
  let expected = 0;
  let variance = 0;
  for (const time of times) {
    const atRisk = both.filter((f) => f.time >= time).length;
    const firstAtRisk = first.filter((f) => f.time >= time).length;
    const events = both.filter((f) => !f.censored && f.time === time).length;
    const share = firstAtRisk / atRisk;
    observed += first.filter((f) => !f.censored && f.time === time).length;
    expected += events * share;
    if (atRisk > 1) variance += (events * share * (1 - share) * (atRisk - events)) / (atRisk - 1);
  }
  const chiSquare = variance > 0 ? (observed - expected) ** 2 / variance : 0;
  return { observed, expected, variance, chiSquare, chance: chiSquareTail(chiSquare) };
}

/**
 * Chance that a chi-square with one degree of freedom exceeds a value: erfc(sqrt(x / 2)), by the series of the error
 * function below 2 and its continued fraction above (Abramowitz and Stegun 7.1.6 and 7.1.14).
 */
export function chiSquareTail(x: number): number {
  if (!(x > 0)) return 1;
  const y = Math.sqrt(x / 2);
  if (y < 2) {
    let term = y;
    let sum = y;
    for (let n = 1; term > 1e-17 * sum; n++) {
      term *= (2 * y * y) / (2 * n + 1);
      sum += term;
    }
    return 1 - (2 / Math.sqrt(Math.PI)) * Math.exp(-y * y) * sum;
  }
  let fraction = 0;
  for (let n = 60; n >= 1; n--) fraction = n / 2 / (y + fraction);
  return Math.exp(-y * y) / (Math.sqrt(Math.PI) * (y + fraction));
}
