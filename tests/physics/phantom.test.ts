import { describe, expect, it } from 'vitest';
import {
  addEllipse,
  headPhantom,
  isInside,
  movedRegion,
  noSignal,
  phantomTissues,
  tissueAt,
  tissueAtPoint,
  type Region,
} from '../../src/physics/index.js';

const sample: Region = {
  tissue: 'fat',
  over: noSignal,
  xMm: 7,
  yMm: -4,
  halfXMm: 5,
  halfYMm: 11,
  turnDeg: 25,
};

function spectrumAt(region: Region, kx: number, ky: number): { real: number; imaginary: number } {
  const row = {
    kx,
    ky,
    stepX: 0,
    stepY: 0,
    real: new Float64Array(1),
    imaginary: new Float64Array(1),
  };
  addEllipse(region, 1, row);
  return { real: row.real[0]!, imaginary: row.imaginary[0]! };
}

describe('the spectrum of an ellipse', () => {
  it('is its area at the centre', () => {
    expect(spectrumAt(sample, 0, 0).real).toBeCloseTo(Math.PI * 5 * 11, 9);
  });

  it('is what summing over small squares gives, turned and off centre', () => {
    // Brute force: inside test on a fine grid.
    const step = 0.02;
    for (const [kx, ky] of [
      [0.01, 0],
      [0.03, -0.02],
      [-0.05, 0.06],
      [0, 0.11],
    ] as const) {
      let real = 0;
      let imaginary = 0;
      for (let x = -6; x < 20; x += step) {
        for (let y = -18; y < 10; y += step) {
          if (!isInside(sample, x, y)) continue;
          const phase = -2 * Math.PI * (kx * x + ky * y);
          real += Math.cos(phase) * step * step;
          imaginary += Math.sin(phase) * step * step;
        }
      }
      const exact = spectrumAt(sample, kx, ky);
      expect(Math.abs(exact.real - real)).toBeLessThan(0.1);
      expect(Math.abs(exact.imaginary - imaginary)).toBeLessThan(0.1);
    }
  });

  it('comes out the same along a row of samples as one by one', () => {
    const length = 300;
    const row = {
      kx: -0.6,
      ky: 0.2,
      stepX: 0.004,
      stepY: 0,
      real: new Float64Array(length),
      imaginary: new Float64Array(length),
    };
    addEllipse(sample, 1, row);
    for (const n of [0, 1, 77, 150, 299]) {
      const one = spectrumAt(sample, -0.6 + n * 0.004, 0.2);
      expect(row.real[n]).toBeCloseTo(one.real, 9);
      expect(row.imaginary[n]).toBeCloseTo(one.imaginary, 9);
    }
  });

  it('a shift only turns the phase, a turn turns k-space', () => {
    // Shift and rotation theorems of the Fourier transform.
    const movement = { shiftXMm: 3, shiftYMm: -2, turnDeg: 40 };
    const moved = spectrumAt(movedRegion(sample, movement), 0.05, 0.03);
    const c = Math.cos((40 * Math.PI) / 180);
    const s = Math.sin((40 * Math.PI) / 180);
    const still = spectrumAt(sample, c * 0.05 + s * 0.03, -s * 0.05 + c * 0.03);
    const phase = -2 * Math.PI * (0.05 * 3 + 0.03 * -2);
    expect(moved.real).toBeCloseTo(
      still.real * Math.cos(phase) - still.imaginary * Math.sin(phase),
      9,
    );
    expect(moved.imaginary).toBeCloseTo(
      still.real * Math.sin(phase) + still.imaginary * Math.cos(phase),
      9,
    );
  });
});

describe('the simulated head', () => {
  it('every ellipse lies whole in the tissue it says it is painted on', () => {
    // Else taking that tissue away under it would not be exact.
    headPhantom.regions.forEach((region, index) => {
      const below = { ...headPhantom, regions: headPhantom.regions.slice(0, index) };
      for (let turn = 0; turn < 360; turn += 2) {
        for (const share of [0.2, 0.6, 1]) {
          const u = share * region.halfXMm * Math.cos((turn * Math.PI) / 180);
          const v = share * region.halfYMm * Math.sin((turn * Math.PI) / 180);
          const at = movedRegion(
            { ...region, xMm: u, yMm: v, turnDeg: 0 },
            { shiftXMm: region.xMm, shiftYMm: region.yMm, turnDeg: region.turnDeg },
          );
          expect(tissueAtPoint(below, at.xMm, at.yMm), `ellipse ${index}`).toBe(region.over);
        }
      }
    });
  });

  it('holds tissues that are known at both fields', () => {
    for (const name of phantomTissues(headPhantom)) {
      for (const field of [1.5, 3] as const) expect(tissueAt(name, field).name).toBe(name);
    }
  });

  it('is fluid in the ventricles, lesion in the lesions, nothing outside', () => {
    expect(tissueAtPoint(headPhantom, -11, -4)).toBe('csf');
    expect(tissueAtPoint(headPhantom, 33, 38)).toBe('oedema-like lesion');
    expect(tissueAtPoint(headPhantom, 11, -4)).toBe('catheter');
    expect(tissueAtPoint(headPhantom, 0, 60)).toBe('white matter');
    expect(tissueAtPoint(headPhantom, 100, 100)).toBe(noSignal);
  });
});
