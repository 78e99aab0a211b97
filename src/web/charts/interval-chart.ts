import { scaleLinear } from 'd3-scale';
import { escaped, picture, r, ticksBelow, type PictureWords } from './svg.js';

/** A value with its limits on one line of the chart. */
export interface IntervalRow {
  readonly name: string;
  readonly value: number;
  readonly low: number;
  readonly high: number;
  /** As printed beside it. */
  readonly figure: string;
}

export interface IntervalChart extends PictureWords {
  readonly xLabel: string;
  readonly rows: readonly IntervalRow[];
}

const width = 460;
const rowHeight = 40;
const left = 10;
const right = 66;
/** Longest name that has room above its line; the whole of it stands in the description. */
const longestName = 62;

/** Values with their limits, one line each, on a common scale from 0: a dot for the value, a bar for the limits. */
export function intervalChart(chart: IntervalChart): string {
  const { rows } = chart;
  const finite = rows.flatMap((row) => [row.value, row.low, row.high].filter(Number.isFinite));
  const x = scaleLinear()
    .domain([Math.min(0, ...finite), Math.max(1e-9, ...finite)])
    .nice(5)
    .range([left, width - right]);
  const bottom = 6 + rows.length * rowHeight;
  const lines = rows.map((row, n) => {
    const y = 6 + n * rowHeight + 28;
    const [low, high] = [row.low, row.high].map((v) =>
      r(x([v, row.value, 0].find(Number.isFinite)!)),
    );
    const at = r(x(Number.isFinite(row.value) ? row.value : 0));
    return [
      `<text x="${left}" y="${y - 14}">${escaped(shortened(row.name))}</text>`,
      `<line x1="${left}" x2="${at}" y1="${y}" y2="${y}" stroke="currentColor" stroke-width="1" opacity="0.35"/>`,
      `<line x1="${low}" x2="${high}" y1="${y}" y2="${y}" stroke="currentColor" stroke-width="5"/>`,
      `<circle cx="${at}" cy="${y}" r="5" fill="currentColor"/>`,
      `<text x="${width - 2}" y="${y + 4}" text-anchor="end" font-weight="700">${escaped(row.figure)}</text>`,
    ].join('');
  });
  return picture(chart, { width, height: bottom + 42 }, [
    ...lines,
    `<line x1="${left}" x2="${width - right}" y1="${bottom}" y2="${bottom}" stroke="currentColor"/>`,
    ...ticksBelow(x, 5, bottom),
    `<text x="${(left + width - right) / 2}" y="${bottom + 36}" text-anchor="middle">${escaped(chart.xLabel)}</text>`,
  ]);
}

const shortened = (name: string) =>
  name.length > longestName ? `${name.slice(0, longestName - 1).trimEnd()}…` : name;
