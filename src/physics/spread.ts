/**
 * Full width at half maximum of the magnitude of the point-spread function, mm along the phase direction.
 * The spread is the Fourier sum of the line weights, evaluated between the pixels; with equal weights
 * it is the plain sinc width of 1.2067 pixels. The half-maximum points nearest to the centre count.
 * A train that reads the centre late has its outer lines brighter: its main lobe may be narrower than the
 * sinc, at the price of side lobes, which only the border and the contrast of a target tell.
 *
 * @param weights signal at each phase-encode line, centre at floor(length / 2)
 * @param pixelMm acquired pixel size along the phase direction
 * @returns the plain pixel where there is no signal, at most the whole field of view
 */
export function spreadWidthMm(weights: Float64Array, pixelMm: number): number {
  const step = 0.25;
  const centre = Math.floor(weights.length / 2);
  const at = (xPixels: number): number => magnitudeAt(weights, centre, xPixels);
  const peak = at(0);
  if (!(peak > 0)) return pixelMm;
  const edge = (sign: 1 | -1): number => {
    const furthest = weights.length / 2;
    let outside = step;
    while (at(sign * outside) > peak / 2 && outside < furthest) outside += step;
    if (outside >= furthest) return furthest;
    let inside = outside - step;
    for (let n = 0; n < 32; n++) {
      const middle = (inside + outside) / 2;
      if (at(sign * middle) > peak / 2) inside = middle;
      else outside = middle;
    }
    return (inside + outside) / 2;
  };
  return (edge(1) + edge(-1)) * pixelMm;
}

/** |sum of w exp(i 2 pi k x / N)|, by turning one phasor from line to line. */
function magnitudeAt(weights: Float64Array, centre: number, xPixels: number): number {
  const step = (2 * Math.PI * xPixels) / weights.length;
  const turnCos = Math.cos(step);
  const turnSin = Math.sin(step);
  let c = Math.cos(-step * centre);
  let s = Math.sin(-step * centre);
  let real = 0;
  let imaginary = 0;
  for (let i = 0; i < weights.length; i++) {
    real += weights[i]! * c;
    imaginary += weights[i]! * s;
    const next = c * turnCos - s * turnSin;
    s = s * turnCos + c * turnSin;
    c = next;
  }
  return Math.hypot(real, imaginary);
}
