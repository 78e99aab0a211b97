import { emptyGrid, transformRows, type ComplexGrid, type ImageAxis } from './fourier.js';

/**
 * Weight of every phase line in the reconstruction. All lines read: 1. Half-Fourier: 0 for the missing
 * lines, 2 for their mirrors, and a ramp across the lines read on both sides (homodyne, Noll 1991).
 *
 * @param lines lines of the full matrix, centre at floor(lines / 2)
 * @param missing lines not read, from line 0 on
 */
export function reconstructionWeights(lines: number, missing: number): Float64Array {
  const centre = Math.floor(lines / 2);
  const overscan = centre - missing;
  return Float64Array.from({ length: lines }, (_, line) => {
    if (missing === 0) return 1;
    const k = line - centre;
    return Math.max(0, Math.min(2, 1 + k / (overscan + 1)));
  });
}

/**
 * Image magnitude from k-space. Rows are phase lines, columns frequency samples. Half-Fourier data are
 * weighted, brought to the phase of the symmetric lines around the centre, and their real part taken
 * (homodyne, Noll 1991); complete data give the plain magnitude.
 *
 * @returns rows along the phase axis, columns along the frequency axis
 */
export function reconstruct(
  data: ComplexGrid,
  missing: number,
  phase: ImageAxis,
  frequency: ImageAxis,
): { readonly rows: number; readonly columns: number; readonly values: Float64Array } {
  const toImage = (grid: ComplexGrid) => transformRows(transformRows(grid, phase), frequency);
  const image = toImage(weighted(data, reconstructionWeights(data.rows, missing)));
  const { rows, columns } = image;
  if (missing === 0) {
    const values = image.real.map((a, n) => Math.hypot(a, image.imaginary[n]!));
    return { rows, columns, values };
  }
  const coarse = toImage(weighted(data, symmetricWindow(data.rows, missing)));
  const values = image.real.map((a, n) => {
    const b = image.imaginary[n]!;
    const c = coarse.real[n]!;
    const d = coarse.imaginary[n]!;
    const size = Math.hypot(c, d);
    return size > 0 ? Math.abs(a * c + b * d) / size : Math.hypot(a, b);
  });
  return { rows, columns, values };
}

/** The lines that were read on both sides of the centre, tapered (raised cosine) towards the outermost. */
function symmetricWindow(lines: number, missing: number): Float64Array {
  const centre = Math.floor(lines / 2);
  const reach = centre - missing + 1;
  return Float64Array.from({ length: lines }, (_, line) => {
    const distance = Math.abs(line - centre) / reach;
    return distance < 1 ? (1 + Math.cos(Math.PI * distance)) / 2 : 0;
  });
}

function weighted(data: ComplexGrid, weights: Float64Array): ComplexGrid {
  const out = emptyGrid(data.rows, data.columns);
  for (let row = 0; row < data.rows; row++) {
    const weight = weights[row]!;
    for (let n = row * data.columns; n < (row + 1) * data.columns; n++) {
      out.real[n] = data.real[n]! * weight;
      out.imaginary[n] = data.imaginary[n]! * weight;
    }
  }
  return out;
}
