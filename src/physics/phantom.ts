import { besselJ1Over } from './bessel.js';

/** Stands for bone and air: no signal in any sequence, no entry in the tissue tables. */
export const noSignal = 'no signal';

/** An ellipse filled with one tissue. Millimetres from the middle; x to the right, y downwards. */
export interface Region {
  /** Tissue name, or `noSignal`. */
  readonly tissue: string;
  /** Tissue it is painted on. It must lie in that tissue whole: then its spectrum is exact. */
  readonly over: string;
  readonly xMm: number;
  readonly yMm: number;
  /** Half lengths of the axes along x and y before turning. */
  readonly halfXMm: number;
  readonly halfYMm: number;
  /** Turn from x towards y, degrees. */
  readonly turnDeg: number;
}

/** A simulated slice: ellipses painted one over the other, in order. Not a patient. */
export interface Phantom {
  readonly name: string;
  readonly regions: readonly Region[];
}

/** Tissues that give signal in a phantom, each once. */
export function phantomTissues(phantom: Phantom): readonly string[] {
  return [...new Set(phantom.regions.map((r) => r.tissue))].filter((t) => t !== noSignal);
}

/** What lies at a point: the tissue painted last. */
export function tissueAtPoint(phantom: Phantom, xMm: number, yMm: number): string {
  return phantom.regions.findLast((r) => isInside(r, xMm, yMm))?.tissue ?? noSignal;
}

/** Whether a point lies in an ellipse, its edge included. */
export function isInside(region: Region, xMm: number, yMm: number): boolean {
  const [u, v] = turned(xMm - region.xMm, yMm - region.yMm, -region.turnDeg);
  return (u / region.halfXMm) ** 2 + (v / region.halfYMm) ** 2 <= 1;
}

/** The region after a rigid movement: turned about the middle of the field of view, then shifted. */
export function movedRegion(
  region: Region,
  movement: { readonly shiftXMm: number; readonly shiftYMm: number; readonly turnDeg: number },
): Region {
  const [x, y] = turned(region.xMm, region.yMm, movement.turnDeg);
  return {
    ...region,
    xMm: x + movement.shiftXMm,
    yMm: y + movement.shiftYMm,
    turnDeg: region.turnDeg + movement.turnDeg,
  };
}

/** A row of k-space: where it starts, the step between its samples (cycles per mm), and what is read. */
export interface SpectrumRow {
  readonly kx: number;
  readonly ky: number;
  readonly stepX: number;
  readonly stepY: number;
  readonly real: Float64Array;
  readonly imaginary: Float64Array;
}

/**
 * Adds an ellipse's exact Fourier transform along a row of k-space:
 * amplitude x a b J1(2 pi q) / q, q^2 = (a kx')^2 + (b ky')^2, turned and shifted to its place (mm2)
 * (Shepp and Logan 1974 for the ellipses; transform of the disc by Bessel's integral).
 */
export function addEllipse(region: Region, amplitude: number, row: SpectrumRow): void {
  const { xMm, yMm, halfXMm, halfYMm, turnDeg } = region;
  const [stepU, stepV] = turned(row.stepX, row.stepY, -turnDeg);
  const [startU, startV] = turned(row.kx, row.ky, -turnDeg);
  const area = amplitude * 2 * Math.PI * halfXMm * halfYMm;
  const start = -2 * Math.PI * (row.kx * xMm + row.ky * yMm);
  const step = -2 * Math.PI * (row.stepX * xMm + row.stepY * yMm);
  const turnCos = Math.cos(step);
  const turnSin = Math.sin(step);
  let c = Math.cos(start);
  let s = Math.sin(start);
  for (let n = 0; n < row.real.length; n++) {
    const u = halfXMm * (startU + n * stepU);
    const v = halfYMm * (startV + n * stepV);
    const value = area * besselJ1Over(2 * Math.PI * Math.sqrt(u * u + v * v));
    row.real[n] = row.real[n]! + value * c;
    row.imaginary[n] = row.imaginary[n]! + value * s;
    const next = c * turnCos - s * turnSin;
    s = s * turnCos + c * turnSin;
    c = next;
  }
}

function turned(x: number, y: number, deg: number): readonly [number, number] {
  const angle = (deg * Math.PI) / 180;
  const c = Math.cos(angle);
  const s = Math.sin(angle);
  return [c * x - s * y, s * x + c * y];
}
