/**
 * Quantile of Student's t distribution: the value that is not exceeded with probability p. Found by halving on the
 * distribution function, which is the regularised incomplete beta function (Abramowitz and Stegun 26.7.1).
 *
 * @param p strictly between 0 and 1
 * @param degrees degrees of freedom, 1 or more
 */
export function studentQuantile(p: number, degrees: number): number {
  if (p < 0.5) return -studentQuantile(1 - p, degrees);
  let low = 0;
  let high = 1;
  while (studentBelow(high, degrees) < p) high *= 2;
  for (let i = 0; i < 200 && high - low > 1e-13 * high; i++) {
    const middle = (low + high) / 2;
    if (studentBelow(middle, degrees) < p) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** P(T <= t) for t of 0 or more. */
function studentBelow(t: number, degrees: number): number {
  return 1 - incompleteBeta(degrees / 2, 0.5, degrees / (degrees + t * t)) / 2;
}

/** Regularised incomplete beta function by its continued fraction (Lentz's method; Press and others, Numerical Recipes 6.4). */
function incompleteBeta(a: number, b: number, x: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  const front = Math.exp(
    logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log1p(-x),
  );
  return x < (a + 1) / (a + b + 2)
    ? (front * fraction(a, b, x)) / a
    : 1 - (front * fraction(b, a, 1 - x)) / b;
}

function fraction(a: number, b: number, x: number): number {
  const least = 1e-300;
  const away = (value: number) => (Math.abs(value) < least ? least : value);
  let c = 1;
  let d = 1 / away(1 - ((a + b) * x) / (a + 1));
  let result = d;
  for (let m = 1; m <= 500; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / away(1 + even * d);
    c = away(1 + even / c);
    result *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / away(1 + odd * d);
    c = away(1 + odd / c);
    const change = d * c;
    result *= change;
    if (Math.abs(change - 1) < 1e-15) break;
  }
  return result;
}

/** Logarithm of the gamma function by Stirling's series, pushed up to where it is exact (Abramowitz and Stegun 6.1.41). */
function logGamma(x: number): number {
  let shift = 0;
  let y = x;
  while (y < 12) {
    shift += Math.log(y);
    y += 1;
  }
  const square = 1 / (y * y);
  const series = (1 / 12 - square * (1 / 360 - square * (1 / 1260 - square / 1680))) / y;
  return (y - 0.5) * Math.log(y) - y + 0.5 * Math.log(2 * Math.PI) + series - shift;
}
