import { describe, expect, it } from 'vitest';
import { lineChart } from '../../src/web/charts/line-chart.js';
import { escaped } from '../../src/web/charts/svg.js';
import { tableTimeChart } from '../../src/web/charts/table-time-chart.js';

// What the charts must be is ours (no source): shape without colour, words for screen readers, no markup from text.

const numbers = (svg: string, pattern: RegExp) =>
  [...svg.matchAll(pattern)].map((m) => Number(m[1]));

describe('a line chart', () => {
  const chart = lineChart({
    title: 'Echo train',
    description: 'two tissues',
    xLabel: 'echo',
    yLabel: 'amplitude',
    curves: [
      { name: 'a <b>', values: [1, 0.5, 0.25], firstX: 1, stepX: 1 },
      { name: 'flat', values: [0.3, 0.3, 0.3], firstX: 1, stepX: 1 },
    ],
  });
  it('tells its curves apart by dashes, says itself to a screen reader, and escapes names', () => {
    expect(chart.match(/<path /g)).toHaveLength(2);
    expect(new Set(chart.match(/<path [^>]*stroke-dasharray="[^"]*"/g)).size).toBe(2);
    expect(chart).toContain('role="img" aria-label="Echo train. two tissues"');
    expect(chart).toContain('<title>Echo train</title><desc>two tissues</desc>');
    expect(chart).not.toContain('<b>');
    expect(escaped('"&')).toBe('&#34;&#38;');
  });
  it('draws a falling curve downwards and a flat one level', () => {
    const paths = [...chart.matchAll(/<path d="([^"]*)"/g)].map((m) =>
      numbers(m[1] ?? '', /,(\d+(?:\.\d+)?)/g),
    );
    expect(paths[0]).toHaveLength(3);
    expect(paths[0]).toEqual([...(paths[0] ?? [])].sort((a, b) => a - b));
    expect(paths[0]?.[0]).toBeLessThan(paths[0]?.[2] ?? 0);
    expect(new Set(paths[1]).size).toBe(1);
  });
  it('draws in the ink of the page alone', () => {
    expect(chart.replace(/(stroke|fill)="(currentColor|none)"/g, '')).not.toMatch(
      /(stroke|fill)="|rgb|#[0-9a-f]{3,6}"/,
    );
  });
});

describe('the table-time chart', () => {
  const times = { tenthS: 14 * 60, medianS: 18 * 60, ninetiethS: 24 * 60 };
  it('says its three times and the slot', () => {
    const chart = tableTimeChart({ ...times, slotS: 1800 });
    expect(chart).toContain('between 14 min and 24 min');
    expect(chart).toContain('half of them less than 18 min');
    expect(chart).toContain('the slot ends at 30 min');
  });
  it('is one filled box inside the slot; what reaches beyond is empty and dashed', () => {
    const boxes = (slotMin: number) =>
      tableTimeChart({ ...times, slotS: slotMin * 60 }).match(/<rect [^>]*>/g) ?? [];
    const isDashed = (box: string) =>
      box.includes('stroke-dasharray') && box.includes('fill="none"');
    expect(boxes(30).map(isDashed)).toEqual([false]);
    expect(boxes(20).map(isDashed)).toEqual([false, true]);
    expect(boxes(10).map(isDashed)).toEqual([true]);
  });
  it('keeps its parts to scale and inside the picture', () => {
    for (const slotMin of [10, 20, 30, 120]) {
      const chart = tableTimeChart({ ...times, slotS: slotMin * 60 });
      const [zero = 0] = numbers(chart, /translate\(([\d.]+),/g);
      const lefts = numbers(chart, /<rect x="([\d.]+)"/g);
      const widths = numbers(chart, /<rect x="[\d.]+" y="\d+" width="([\d.]+)"/g);
      const left = lefts[0] ?? NaN;
      const right = (lefts.at(-1) ?? NaN) + (widths.at(-1) ?? NaN);
      // From the ends of the bar alone: 14 to 24 minutes; rounding to a tenth of a unit.
      expect(Math.abs((right - zero) / (left - zero) - 24 / 14)).toBeLessThan(0.02);
      expect(right).toBeLessThanOrEqual(460);
      const slot = numbers(chart, /x1="([\d.]+)" x2="[\d.]+" y1="18"/g)[0] ?? NaN;
      expect(Math.abs((slot - zero) / (left - zero) - slotMin / 14)).toBeLessThan(0.06);
    }
  });
});
