/**
 * Uniform numbers in [0, 1) from a seed, for searches that must repeat: xorshift128 (Marsaglia 2003). Not for simulation,
 * where streams must be independent of each other.
 */
export function repeatableStream(seed: number): () => number {
  let x = 123456789 ^ seed;
  let y = 362436069;
  let z = 521288629;
  let w = 88675123;
  const next = (): number => {
    const t = x ^ (x << 11);
    x = y;
    y = z;
    z = w;
    w = w ^ (w >>> 19) ^ (t ^ (t >>> 8));
    return (w >>> 0) / 2 ** 32;
  };
  // Seeds that differ in one bit part ways only after some steps.
  for (let i = 0; i < 20; i++) next();
  return next;
}
