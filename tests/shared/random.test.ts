import { describe, expect, it } from 'vitest';
import { randomStream } from '../../src/shared/index.js';

const first = (seed: number, name: string, count = 5) => {
  const next = randomStream(seed, name);
  return Array.from({ length: count }, next);
};

describe('streams of chance', () => {
  it('the numbers of a seed and a name never change: what was simulated can be simulated again', () => {
    expect(first(1, 'who')).toMatchInlineSnapshot(`
      [
        0.8051699343710836,
        0.1437282943080853,
        0.6024840809052343,
        0.8710753868266725,
        0.09803985303459295,
      ]
    `);
    expect(first(1, 'movement')).toMatchInlineSnapshot(`
      [
        0.24015420693696998,
        0.9666155618853184,
        0.16042319825490647,
        0.1248087905629246,
        0.25879583461526345,
      ]
    `);
    expect(first(2026, 'who')).toMatchInlineSnapshot(`
      [
        0.05092623169892274,
        0.008041560302553652,
        0.06788994401323789,
        0.7099957740481143,
        0.21443608709733908,
      ]
    `);
  });

  it('small seeds do not start near each other', () => {
    const starts = Array.from({ length: 200 }, (_, seed) => first(seed, 'who', 1)[0]!);
    const mean = starts.reduce((a, b) => a + b, 0) / starts.length;
    // Uniform: mean 0.5, standard error 0.0204 for 200.
    expect(Math.abs(mean - 0.5)).toBeLessThan(4 * 0.0204);
    expect(new Set(starts).size).toBe(200);
  });

  it('streams of different names do not follow each other', () => {
    const n = 20_000;
    const a = first(7, 'who', n);
    const b = first(7, 'table', n);
    const product = a.reduce((sum, x, i) => sum + (x - 0.5) * (b[i]! - 0.5), 0) / n;
    // Correlation of independent streams: standard error 1 / sqrt(n).
    expect(Math.abs(product * 12)).toBeLessThan(4 / Math.sqrt(n));
  });

  it('drawing more from one stream leaves another where it was', () => {
    const who = randomStream(3, 'who');
    const table = randomStream(3, 'table');
    for (let i = 0; i < 100; i++) table();
    expect(who()).toBe(first(3, 'who', 1)[0]);
  });
});
