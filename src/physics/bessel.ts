const small = [0.5, -0.56249985, 0.21093573, -0.03954289, 0.00443319, -0.00031761, 0.00001109];
const size = [0.79788456, 0.00000156, 0.01659667, 0.00017105, -0.00249511, 0.00113653, -0.00020033];
const angle = [
  -2.35619449, 0.12499612, 0.0000565, -0.00637879, 0.00074348, 0.00079824, -0.00029166,
];

/**
 * Bessel function of the first kind, order 1, for x >= 0. Polynomials of Abramowitz and Stegun 1964,
 * 9.4.4 to 9.4.6; error below 1e-7.
 */
export function besselJ1(x: number): number {
  if (x < 3) return x * polynomial(small, (x * x) / 9);
  const y = 3 / x;
  return (polynomial(size, y) * Math.cos(x + polynomial(angle, y))) / Math.sqrt(x);
}

function polynomial(coefficients: readonly number[], x: number): number {
  let sum = 0;
  for (let n = coefficients.length - 1; n >= 0; n--) sum = sum * x + coefficients[n]!;
  return sum;
}
