/**
 * Random quantities made from one uniform number each by inverting their distribution: what is larger with one policy
 * stays larger with another on the same number, which is what pairing policies on common random numbers rests on
 * (Law, Simulation Modeling and Analysis, section 11.2).
 */

/**
 * Standard normal quantile by Wichura's algorithm AS 241 (1988), routine PPND16: relative error about 1e-16.
 *
 * @param p strictly between 0 and 1
 */
export function normalQuantile(p: number): number {
  const q = p - 0.5;
  if (Math.abs(q) <= 0.425) {
    const r = 0.180625 - q * q;
    return q * ratio(r, centre);
  }
  const tail = Math.sqrt(-Math.log(q < 0 ? p : 1 - p));
  const x = tail <= 5 ? ratio(tail - 1.6, flank) : ratio(tail - 5, far);
  return q < 0 ? -x : x;
}

interface Ratio {
  readonly above: readonly number[];
  readonly below: readonly number[];
}

const centre: Ratio = {
  above: [
    3.387132872796366608, 133.14166789178437745, 1971.5909503065514427, 13731.693765509461125,
    45921.953931549871457, 67265.770927008700853, 33430.575583588128105, 2509.0809287301226727,
  ],
  below: [
    1, 42.313330701600911252, 687.1870074920579083, 5394.1960214247511077, 21213.794301586595867,
    39307.89580009271061, 28729.085735721942674, 5226.495278852545925,
  ],
};
const flank: Ratio = {
  above: [
    1.42343711074968357734, 4.6303378461565452959, 5.7694972214606914055, 3.64784832476320460504,
    1.27045825245236838258, 0.24178072517745061177, 0.0227238449892691845833,
    7.7454501427834140764e-4,
  ],
  below: [
    1, 2.05319162663775882187, 1.6763848301838038494, 0.68976733498510000455,
    0.14810397642748007459, 0.0151986665636164571966, 5.475938084995344946e-4,
    1.05075007164441684324e-9,
  ],
};
const far: Ratio = {
  above: [
    6.6579046435011037772, 5.4637849111641143699, 1.7848265399172913358, 0.29656057182850489123,
    0.026532189526576123093, 0.0012426609473880784386, 2.71155556874348757815e-5,
    2.01033439929228813265e-7,
  ],
  below: [
    1, 0.59983220655588793769, 0.13692988092273580531, 0.0148753612908506148525,
    7.868691311456132591e-4, 1.8463183175100546818e-5, 1.4215117583164458887e-7,
    2.04426310338993978564e-15,
  ],
};

function ratio(x: number, { above, below }: Ratio): number {
  let top = 0;
  let bottom = 0;
  for (let i = 7; i >= 0; i--) {
    top = top * x + above[i]!;
    bottom = bottom * x + below[i]!;
  }
  return top / bottom;
}

/**
 * Lognormal quantity of mean 1 and the given coefficient of variation, from a standard normal one.
 *
 * @param z standard normal
 * @param cv standard deviation over mean, 0 or more
 */
export function lognormalFactor(z: number, cv: number): number {
  if (cv === 0) return 1;
  const variance = Math.log1p(cv * cv);
  return Math.exp(z * Math.sqrt(variance) - variance / 2);
}

/** Exponential quantity of the given mean, from a uniform number in [0, 1). */
export const exponential = (u: number, mean: number): number => -mean * Math.log1p(-u);

/**
 * Poisson count by walking up its distribution from 0; for means of a few hundred at most.
 *
 * @param u in [0, 1)
 * @param mean 0 or more
 */
export function poisson(u: number, mean: number): number {
  if (mean <= 0) return 0;
  // By logarithms: e^-mean alone would vanish for large means.
  let log = -mean;
  let sum = Math.exp(log);
  let count = 0;
  while (u >= sum && count < 10 * mean + 100) {
    count += 1;
    log += Math.log(mean / count);
    sum += Math.exp(log);
  }
  return count;
}

/**
 * Binomial count by walking up its distribution from 0.
 *
 * @param u in [0, 1)
 * @param trials whole number, 0 or more
 * @param chance of each, 0..1
 */
export function binomial(u: number, trials: number, chance: number): number {
  if (chance <= 0 || trials === 0) return 0;
  if (chance >= 1) return trials;
  const odds = chance / (1 - chance);
  let mass = (1 - chance) ** trials;
  let sum = mass;
  let count = 0;
  while (u >= sum && count < trials) {
    mass *= (odds * (trials - count)) / (count + 1);
    count += 1;
    sum += mass;
  }
  return count;
}
