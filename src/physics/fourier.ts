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

/** Centres of `count` pixels across `lengthMm`, the middle at 0; mirrored positions are equal to the last bit. */
export function pixelCentres(count: number, lengthMm: number): Float64Array {
  return Float64Array.from(
    { length: count },
    (_, n) => ((2 * n + 1 - count) / (2 * count)) * lengthMm,
  );
}

/**
 * Sum over rows of grid[row] x exp(i 2 pi k position), for every position, and the result laid on its
 * side (positions become columns): applied twice it is the inverse transform in both directions with rows
 * and columns back in place. Direct sums, so no length is special; rows at +k and -k are added and
 * subtracted once (cosine and sine parts), and a position and its mirror share both sums.
 */
export function transformRows(grid: ComplexGrid, axis: ImageAxis): ComplexGrid {
  const { columns } = grid;
  const { positionsMm, fovMm } = axis;
  const count = positionsMm.length;
  const out = emptyGrid(columns, count);
  const { even, odd } = folded(grid);
  const cosines = emptyGrid(1, columns);
  const sines = emptyGrid(1, columns);
  const put = (position: number, sign: 1 | -1) => {
    for (let n = 0; n < columns; n++) {
      out.real[n * count + position] = cosines.real[n]! - sign * sines.imaginary[n]!;
      out.imaginary[n * count + position] = cosines.imaginary[n]! + sign * sines.real[n]!;
    }
  };
  for (let position = 0; position < count; position++) {
    const at = positionsMm[position]!;
    const mirror = count - 1 - position;
    const isMirrored = mirror !== position && positionsMm[mirror] === -at;
    if (isMirrored && mirror < position) continue;
    const step = (2 * Math.PI * at) / fovMm;
    sumRows(even, Math.cos, step, cosines);
    sumRows(odd, Math.sin, step, sines);
    put(position, 1);
    if (isMirrored) put(mirror, -1);
  }
  return out;
}

/** Row k: what lies at +k plus, and less, what lies at -k; a row without partner counts its partner as 0. */
function folded(grid: ComplexGrid): { readonly even: ComplexGrid; readonly odd: ComplexGrid } {
  const { rows, columns, real, imaginary } = grid;
  const centre = Math.floor(rows / 2);
  const even = emptyGrid(centre + 1, columns);
  const odd = emptyGrid(centre + 1, columns);
  for (let row = 0; row < rows; row++) {
    const k = Math.abs(row - centre);
    const sign = row < centre ? -1 : 1;
    for (let n = 0; n < columns; n++) {
      const to = k * columns + n;
      const a = real[row * columns + n]!;
      const b = imaginary[row * columns + n]!;
      even.real[to] = even.real[to]! + a;
      even.imaginary[to] = even.imaginary[to]! + b;
      odd.real[to] = odd.real[to]! + sign * a;
      odd.imaginary[to] = odd.imaginary[to]! + sign * b;
    }
  }
  return { even, odd };
}

/** Sum over rows k of grid[k] x wave(k x step), one value per column. */
function sumRows(
  grid: ComplexGrid,
  wave: (angle: number) => number,
  step: number,
  sum: ComplexGrid,
): void {
  const { rows, columns, real, imaginary } = grid;
  const sumReal = sum.real.fill(0);
  const sumImaginary = sum.imaginary.fill(0);
  for (let k = 0; k < rows; k += 2) {
    // Two rows a pass: half the stores.
    const v = wave(k * step);
    const w = k + 1 < rows ? wave((k + 1) * step) : 0;
    const first = k * columns;
    const second = k + 1 < rows ? first + columns : first;
    for (let n = 0; n < columns; n++) {
      sumReal[n] = sumReal[n]! + real[first + n]! * v + real[second + n]! * w;
      sumImaginary[n] = sumImaginary[n]! + imaginary[first + n]! * v + imaginary[second + n]! * w;
    }
  }
}
