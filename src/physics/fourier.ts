/** A rectangle of complex numbers, row after row. */
export interface ComplexGrid {
  readonly rows: number;
  readonly columns: number;
  readonly real: Float64Array;
  readonly imaginary: Float64Array;
}

export function emptyGrid(rows: number, columns: number): ComplexGrid {
  const length = rows * columns;
  return { rows, columns, real: new Float64Array(length), imaginary: new Float64Array(length) };
}

/**
 * Positions at which an axis of k-space is turned into image: sample n stands for
 * (n - floor(samples / 2)) / fovMm cycles per mm. Any number of positions: finer ones interpolate as zero filling does.
 */
export interface ImageAxis {
  readonly fovMm: number;
  readonly positionsMm: Float64Array;
}

/** Centres of `count` pixels across `lengthMm`, the middle at 0. */
export function pixelCentres(count: number, lengthMm: number): Float64Array {
  return Float64Array.from({ length: count }, (_, n) => ((n + 0.5) / count - 0.5) * lengthMm);
}

/**
 * Sum over rows of grid[row] x exp(i 2 pi k position), for every position, and the result laid on its
 * side (positions become columns): applied twice it is the inverse transform in both directions with rows
 * and columns back in place. Direct sums, so no length is special.
 */
export function transformRows(grid: ComplexGrid, axis: ImageAxis): ComplexGrid {
  const { rows, columns, real, imaginary } = grid;
  const count = axis.positionsMm.length;
  const out = emptyGrid(columns, count);
  const sumReal = new Float64Array(columns);
  const sumImaginary = new Float64Array(columns);
  for (let p = 0; p < count; p++) {
    sumReal.fill(0);
    sumImaginary.fill(0);
    const step = (2 * Math.PI * (axis.positionsMm[p] ?? 0)) / axis.fovMm;
    for (let row = 0; row < rows; row++) {
      const c = Math.cos(step * (row - Math.floor(rows / 2)));
      const s = Math.sin(step * (row - Math.floor(rows / 2)));
      const from = row * columns;
      for (let n = 0; n < columns; n++) {
        const a = real[from + n]!;
        const b = imaginary[from + n]!;
        sumReal[n] = sumReal[n]! + a * c - b * s;
        sumImaginary[n] = sumImaginary[n]! + a * s + b * c;
      }
    }
    for (let n = 0; n < columns; n++) {
      out.real[n * count + p] = sumReal[n]!;
      out.imaginary[n * count + p] = sumImaginary[n]!;
    }
  }
  return out;
}
