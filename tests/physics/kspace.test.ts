import { describe, expect, it } from 'vitest';
import { planKSpace, type KSpaceRequest } from '../../src/physics/index.js';

const plan = (given: Partial<KSpaceRequest>) =>
  planKSpace({
    phaseLines: 256,
    partialFourier: 1,
    parallelFactor: 1,
    referenceLines: 0,
    echoTrainLength: 16,
    order: 'linear',
    echoSpacingMs: 10,
    ...given,
  });

describe('which echo fills which line', () => {
  it('half-Fourier: 9/16 of 256 lines are 144, 16 of overscan, effective echo time 68 ms at spacing 4', () => {
    // Derived, checks section 4.
    const p = plan({ order: 'single-shot', partialFourier: 9 / 16, echoSpacingMs: 4 });
    expect(p.acquiredLines).toBe(144);
    expect(p.effectiveEchoTimeMs).toBeCloseTo(68, 9);
    expect(p.conjugateFilled).toBe(112);
    expect(p.shots).toBe(1);
  });
  it('0.6 of 256 lines are 154 with 26 of overscan, 108 ms; 0.601 of 153 are 92 with 16', () => {
    const wide = plan({ order: 'single-shot', partialFourier: 0.6, echoSpacingMs: 4 });
    expect([wide.acquiredLines, wide.effectiveEchoTimeMs]).toEqual([154, 108]);
    // 153 lines: the centre is line 76, so 92 lines from 61 on hold 15 before the centre; the checks round to 16.
    const fetal = plan({
      order: 'single-shot',
      phaseLines: 153,
      partialFourier: 0.601,
      echoSpacingMs: 4,
    });
    expect(fetal.acquiredLines).toBe(92);
    expect(fetal.centreEcho).toBe(15);
  });
  it('full-Fourier single-shot of 128 lines takes 128 echoes', () => {
    // Arithmetic.
    expect(plan({ order: 'single-shot', phaseLines: 128 }).echoTrainLength).toBe(128);
  });
  it('centric: the centre is read first', () => {
    const p = plan({ order: 'centric' });
    expect(p.effectiveEchoTimeMs).toBe(10);
    expect(p.echoOfLine[128]).toBe(0);
    expect(p.echoOfLine[0]).toBe(15);
  });
  it('linear: the wanted effective echo time lands on the centre, for any echo', () => {
    for (let wanted = 10; wanted <= 160; wanted += 10) {
      expect(plan({ wantedEffectiveEchoTimeMs: wanted }).effectiveEchoTimeMs).toBe(wanted);
    }
  });
  it('linear: any echo of any train can be put on the centre, also where lines and train do not divide', () => {
    // Found wrong once: 60 lines, a train of 16, 160 ms wanted gave 10 ms.
    for (const phaseLines of [60, 97, 153, 208, 255]) {
      for (const echoTrainLength of [4, 7, 16, 19, 27]) {
        for (let echo = 1; echo <= echoTrainLength; echo++) {
          const wantedEffectiveEchoTimeMs = echo * 10;
          const p = plan({ phaseLines, echoTrainLength, wantedEffectiveEchoTimeMs });
          expect(p.effectiveEchoTimeMs).toBe(wantedEffectiveEchoTimeMs);
        }
      }
    }
  });
  it('no two lines share a shot and an echo, and every shot and echo is used', () => {
    for (const order of ['linear', 'centric', 'single-shot'] as const) {
      for (const phaseLines of [60, 97, 153, 256]) {
        for (const echoTrainLength of [1, 7, 16, 19]) {
          const p = plan({ order, phaseLines, echoTrainLength });
          const places = new Set<number>();
          p.echoOfLine.forEach((e, line) => places.add(e * 1000 + (p.shotOfLine[line] ?? NaN)));
          expect(places.size).toBe(phaseLines);
          expect(new Set(p.shotOfLine).size).toBe(p.shots);
          expect(new Set(p.echoOfLine).size).toBe(p.echoTrainLength);
        }
      }
    }
  });
  it('centric: no line further out is read before one further in, whatever is missing', () => {
    const p = plan({ order: 'centric', phaseLines: 200, partialFourier: 0.6 });
    for (let k = 1; k < 99; k++)
      expect(p.echoOfLine[100 + k + 1]).toBeGreaterThanOrEqual(p.echoOfLine[100 + k] ?? NaN);
  });
  it('every echo is used equally often, whatever the order', () => {
    for (const order of ['linear', 'centric'] as const) {
      const p = plan({ order, wantedEffectiveEchoTimeMs: 90 });
      const uses = new Array<number>(16).fill(0);
      p.echoOfLine.forEach((e) => (uses[e] = (uses[e] ?? 0) + 1));
      expect(new Set(uses)).toEqual(new Set([16]));
    }
  });
  it('parallel imaging skips lines, counts its reference lines, and shortens the single-shot train', () => {
    const whole = plan({ order: 'single-shot' });
    const half = plan({ order: 'single-shot', parallelFactor: 2, referenceLines: 24 });
    expect(whole.acquiredLines).toBe(256);
    // 128 on the pattern and half of the 24 in the centre besides.
    expect(half.acquiredLines).toBe(140);
    expect(half.effectiveEchoTimeMs).toBeLessThan(whole.effectiveEchoTimeMs);
  });
  it('conjugate-filled lines take the echo of their mirror', () => {
    const p = plan({ order: 'single-shot', partialFourier: 0.5625, echoSpacingMs: 4 });
    for (let k = 20; k < 128; k += 9) expect(p.echoOfLine[128 - k]).toBe(p.echoOfLine[128 + k]);
  });
  it('refuses what cannot be, by name', () => {
    expect(() => plan({ partialFourier: 0.5 })).toThrow('Partial Fourier');
    expect(() => plan({ phaseLines: 0 })).toThrow('phase lines');
    expect(() => plan({ echoTrainLength: 0 })).toThrow('RF Echo Train Length');
    expect(() => plan({ parallelFactor: NaN })).toThrow('Parallel Reduction Factor');
    expect(() => plan({ referenceLines: -1 })).toThrow('reference lines');
    expect(() => plan({ echoSpacingMs: Infinity })).toThrow('echo spacing');
    expect(() => plan({ wantedEffectiveEchoTimeMs: NaN })).toThrow('wanted echo time');
  });
});
