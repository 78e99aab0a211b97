import { describe, expect, it } from 'vitest';
import { stepChart } from '../../src/web/charts/step-chart.js';

// What the chart must be is ours (no source): steps fall where events were, no colour is needed, nothing becomes markup.

const chart = stepChart({
  title: 'Keeping still',
  description: '<b>half</b> of four',
  ...{ xLabel: 'minutes', yLabel: 'kept still so long', toX: 20 },
  steps: {
    name: 'these records',
    points: [
      { x: 5, y: 0.75 },
      { x: 10, y: 0.5 },
      { x: 25, y: 0 },
    ],
    ...{ endX: 30, ticksX: [8, 8, 12, 28] },
  },
  smooth: { name: 'the policy', at: (x) => 0.9 ** (x / 20) },
  limits: { name: '95 % limits', x: 10, low: 0.1, high: 0.8 },
});
const paths = [...chart.matchAll(/<path d="([^"]*)"([^>]*)>/g)];

describe('a step chart', () => {
  it('falls once for each event on the axis, and only downwards', () => {
    const solid = paths.find(([, , look]) => !look!.includes('dasharray'))![1]!;
    const heights = [...solid.matchAll(/V([\d.]+)/g)].map((m) => Number(m[1]));
    expect(heights).toHaveLength(2);
    expect(heights[0]).toBeLessThan(heights[1]!);
    expect(solid).not.toMatch(/[A-Z]-/);
  });

  it('tells the two curves apart without colour, and draws in the ink of the page', () => {
    expect(paths).toHaveLength(2);
    expect(paths.filter(([, , look]) => look!.includes('dasharray'))).toHaveLength(1);
    expect(chart.replace(/(stroke|fill)="(currentColor|none)"/g, '')).not.toMatch(
      /(stroke|fill)="/,
    );
  });

  it('says itself to a screen reader and lets no text become markup', () => {
    expect(chart).toContain('role="img"');
    expect(chart).not.toContain('<b>');
    for (const name of ['these records', 'the policy', '95 % limits'])
      expect(chart).toContain(`>${name}</text>`);
  });
});
