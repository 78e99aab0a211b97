/** Chance of getting through t seconds undisturbed: 1 at 0, never rising. */
export type Survival = (tS: number) => number;

/**
 * Weibull survival curve through one point: S(t) = chance^((t / atS)^shape) (Weibull 1951; shape 1 is
 * the exponential, constant hazard -ln(chance)/atS).
 *
 * @param chance S(atS), strictly between 0 and 1
 * @param atS seconds, above 0
 * @param shape 1: constant hazard; above 1: rising with time
 */
export function weibullThrough(chance: number, atS: number, shape = 1): Survival {
  const log = Math.log(chance);
  return (tS) => (tS <= 0 ? 1 : Math.exp(log * (tS / atS) ** shape));
}

/** Weibull survival curve of given mean and shape: scale = mean / Gamma(1 + 1/shape). */
export function weibullWithMean(meanS: number, shape: number): Survival {
  const scale = meanS / gamma(1 + 1 / shape);
  return (tS) => (tS <= 0 ? 1 : Math.exp(-((tS / scale) ** shape)));
}

/** Mean of the Weibull survival curve through one point. */
export function weibullMean(chance: number, atS: number, shape: number): number {
  return (atS / (-Math.log(chance)) ** (1 / shape)) * gamma(1 + 1 / shape);
}

/** Chance of t more seconds undisturbed after u seconds have gone well: S(u+t)/S(u). */
export function conditional(survival: Survival, elapsedS: number, tS: number): number {
  const before = survival(elapsedS);
  return before > 0 ? survival(elapsedS + tS) / before : 0;
}

/** Longest time for which the chance is at least `chance`, s, found by halving to a tenth of a second. */
export function longestWith(survival: Survival, chance: number, ceilingS = 4 * 3600): number {
  if (survival(ceilingS) >= chance) return ceilingS;
  let low = 0;
  let high = ceilingS;
  while (high - low > 0.001) {
    const middle = (low + high) / 2;
    if (survival(middle) >= chance) low = middle;
    else high = middle;
  }
  return low;
}

/** Gamma function by Lanczos' approximation (1964), relative error below 1e-10 for x >= 0.5. */
function gamma(x: number): number {
  const g = 7;
  const c = [
    0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313,
    -176.61502916214059, 12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6,
    1.5056327351493116e-7,
  ];
  const y = x - 1;
  const series = c.reduce(
    (sum, value, index) => (index === 0 ? value : sum + value / (y + index)),
    0,
  );
  const t = y + g + 0.5;
  return Math.sqrt(2 * Math.PI) * t ** (y + 0.5) * Math.exp(-t) * series;
}
