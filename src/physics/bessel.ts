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

const perUnit = 32;
const furthest = 600;
/** J1(x) / x at steps of 1/32 from -1/32 on; even in x. */
const table = Float64Array.from({ length: furthest * perUnit + 4 }, (_, n) => {
  const x = Math.abs(n - 1) / perUnit;
  return x === 0 ? 0.5 : besselJ1(x) / x;
});

/**
 * J1(x) / x for x >= 0, 1/2 at 0: four-point interpolation (Lagrange) in a table of `besselJ1`, which a
 * preview asks a million times over; error below 1e-7, as that of the polynomials themselves.
 */
export function besselJ1Over(x: number): number {
  const place = x * perUnit;
  const n = Math.floor(place);
  if (n >= furthest * perUnit) return besselJ1(x) / x;
  const t = place - n;
  const a = table[n]!;
  const b = table[n + 1]!;
  const c = table[n + 2]!;
  const d = table[n + 3]!;
  const bend = (3 * (b - c) + d - a) / 6;
  const half = (a + c) / 2 - b;
  return b + t * (c - b - half - bend + (half + bend * t) * t);
}
