export interface TargetGeometry {
  readonly diameterMm: number;
  readonly pixelPhaseMm: number;
  readonly pixelFrequencyMm: number;
  readonly sliceThicknessMm: number;
}

/**
 * Signed contrast at the centre of a round target after blur and partial volume. The target is a
 * sphere; along the phase direction it is blurred by its own tissue's point spread and cut out of a
 * background blurred by the background's; along the frequency direction and through the slice it is
 * averaged over the plain pixel and slice. A large target gives the plain difference at the centre of
 * k-space, a vanishing one 0. The approximation: magnitude and truncation along frequency are ignored.
 *
 * @param weightsTarget signal of the target's tissue on every phase line, proton density included
 * @param weightsBackground the same of the background
 */
export function targetContrast(
  weightsTarget: Float64Array,
  weightsBackground: Float64Array,
  geometry: TargetGeometry,
): number {
  const lines = weightsTarget.length;
  const centre = Math.floor(lines / 2);
  const radius = geometry.diameterMm / 2;
  const radiusPixels = Math.min(radius / geometry.pixelPhaseMm, lines / 2);
  const samples = Math.max(24, Math.ceil(radiusPixels * 12));
  const step = radiusPixels / samples;
  // Cosine transform of the covered share along the phase direction, folded onto |k|.
  let contrast = 0;
  for (let n = 0; n < samples; n++) {
    const y = (n + 0.5) * step;
    const covered = coveredShare(
      Math.sqrt(Math.max(0, radius ** 2 - (y * geometry.pixelPhaseMm) ** 2)),
      geometry,
    );
    if (covered > 0)
      contrast += covered * spreadDifference(weightsTarget, weightsBackground, centre, y);
  }
  return (2 * step * contrast) / lines;
}

/** Sum over lines of (target - background) cos(2 pi k y / N): the difference of the two point spreads, times N. */
function spreadDifference(
  target: Float64Array,
  background: Float64Array,
  centre: number,
  y: number,
): number {
  const step = (2 * Math.PI * y) / target.length;
  const turnCos = Math.cos(step);
  const turnSin = Math.sin(step);
  let c = Math.cos(-step * centre);
  let s = Math.sin(-step * centre);
  let sum = 0;
  for (let i = 0; i < target.length; i++) {
    sum += (target[i]! - background[i]!) * c;
    const next = c * turnCos - s * turnSin;
    s = s * turnCos + c * turnSin;
    c = next;
  }
  return sum;
}

/** Share of one pixel's frequency width and slice thickness that a disc of this radius covers. */
function coveredShare(
  discRadius: number,
  { pixelFrequencyMm, sliceThicknessMm }: TargetGeometry,
): number {
  const samples = 16;
  let area = 0;
  for (let n = 0; n < samples; n++) {
    const x = ((n + 0.5) / samples - 0.5) * pixelFrequencyMm;
    const chord = 2 * Math.sqrt(Math.max(0, discRadius ** 2 - x ** 2));
    area += Math.min(sliceThicknessMm, chord) / samples;
  }
  return area / sliceThicknessMm;
}
