/**
 * 10-90 % width of the edge between two tissues along the phase direction, mm: what a caliper meets.
 * Each side of the edge is blurred by its own tissue's weights (Fourier sum of a half-period box per
 * tissue). The levels are 10 and 90 % of the way between the two plain signals, and the crossings
 * nearest to the edge count, so that truncation ringing further out does not.
 *
 * @param weightsA signal of the first tissue on every line, proton density included
 * @param weightsB the same of the second; same length
 * @returns Infinity when the two are equally bright, or blurred so far that a level is not reached
 */
export function borderWidthMm(
  weightsA: Float64Array,
  weightsB: Float64Array,
  pixelMm: number,
): number {
  const lines = weightsA.length;
  const centre = Math.floor(lines / 2);
  const a = weightsA[centre] ?? 0;
  const b = weightsB[centre] ?? 0;
  const difference = a - b;
  if (Math.abs(difference) <= 1e-9 * Math.max(Math.abs(a), Math.abs(b), 1e-12)) return Infinity;
  // Share of the way from B to A at x pixels from the edge, A on the positive side.
  const share = (x: number): number => {
    let real = (a + b) / 2;
    let imaginary = 0;
    for (let k = -centre; k < lines - centre; k++) {
      if (k % 2 === 0) continue;
      const amplitude = ((weightsA[k + centre] ?? 0) - (weightsB[k + centre] ?? 0)) / (Math.PI * k);
      const phase = (2 * Math.PI * k * x) / lines;
      real += amplitude * Math.sin(phase);
      imaginary -= amplitude * Math.cos(phase);
    }
    return (Math.hypot(real, imaginary) - b) / difference;
  };
  return (crossing(share, 0.9, 1, lines) + crossing((x) => 1 - share(-x), 0.9, 1, lines)) * pixelMm;
}

/** Nearest distance from the edge at which the share reaches the level, pixels. May be negative when the edge is shifted. */
function crossing(
  share: (x: number) => number,
  level: number,
  direction: 1 | -1,
  lines: number,
): number {
  const step = 0.1;
  const furthest = lines / 4;
  let x = 0;
  if (share(0) >= level) {
    while (share(direction * x) >= level && x > -furthest) x -= step;
    x += step;
  } else {
    while (share(direction * x) < level && x < furthest) x += step;
  }
  if (Math.abs(x) >= furthest) return Infinity;
  let low = x - step;
  let high = x;
  for (let n = 0; n < 20; n++) {
    const middle = (low + high) / 2;
    if (share(direction * middle) >= level) high = middle;
    else low = middle;
  }
  return (low + high) / 2;
}
