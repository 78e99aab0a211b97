import { describe, expect, it } from 'vitest';
import {
  emptyGrid,
  pixelCentres,
  transformRows,
  type ComplexGrid,
} from '../../src/physics/fourier.js';

/** The definition, sum by sum. */
function plainSum(grid: ComplexGrid, fovMm: number, positionsMm: Float64Array): ComplexGrid {
  const out = emptyGrid(grid.columns, positionsMm.length);
  positionsMm.forEach((x, p) => {
    for (let column = 0; column < grid.columns; column++) {
      for (let row = 0; row < grid.rows; row++) {
        const angle = (2 * Math.PI * (row - Math.floor(grid.rows / 2)) * x) / fovMm;
        const a = grid.real[row * grid.columns + column]!;
        const b = grid.imaginary[row * grid.columns + column]!;
        const to = column * positionsMm.length + p;
        out.real[to] = out.real[to]! + a * Math.cos(angle) - b * Math.sin(angle);
        out.imaginary[to] = out.imaginary[to]! + a * Math.sin(angle) + b * Math.cos(angle);
      }
    }
  });
  return out;
}

/** Numbers without any symmetry a fold could lean on. */
function uneven(rows: number, columns: number): ComplexGrid {
  const grid = emptyGrid(rows, columns);
  for (let n = 0; n < rows * columns; n++) {
    grid.real[n] = Math.sin(1 + n * 1.7) + 0.3;
    grid.imaginary[n] = Math.cos(n * n * 0.13);
  }
  return grid;
}

const furthest = (a: Float64Array, b: Float64Array) =>
  a.reduce((most, v, n) => Math.max(most, Math.abs(v - b[n]!)), 0);

describe('the transform of rows is the plain sum of the definition', () => {
  // Discrete Fourier sum written out; 1e-11 for rounding.
  it.each([
    ['even rows, positions that mirror', 10, pixelCentres(8, 30)],
    ['odd rows, positions that mirror with one in the middle', 11, pixelCentres(7, 30)],
    ['even rows, positions without mirror', 8, Float64Array.from([-9, -1, 4, 11.5])],
    ['odd rows, some that mirror and some not', 9, Float64Array.from([-5, -2, 3, 5])],
    ['one row', 1, pixelCentres(3, 20)],
    ['two rows', 2, pixelCentres(3, 20)],
  ] as const)('%s', (_, rows, positions) => {
    const grid = uneven(rows, 5);
    const made = transformRows(grid, { fovMm: 40, positionsMm: positions });
    const plain = plainSum(grid, 40, positions);
    expect([made.rows, made.columns]).toEqual([5, positions.length]);
    expect(furthest(made.real, plain.real)).toBeLessThan(1e-11);
    expect(furthest(made.imaginary, plain.imaginary)).toBeLessThan(1e-11);
  });
});

describe('pixel centres', () => {
  it('lie half a pixel inside both ends and mirror exactly', () => {
    expect([...pixelCentres(4, 8)]).toEqual([-3, -1, 1, 3]);
    const many = pixelCentres(241, 203.7);
    many.forEach((x, n) => expect(many[240 - n]! + x).toBe(0));
  });
});
