import { scaleLinear } from 'd3-scale';
import { line } from 'd3-shape';
import { escaped, picture, r, ticksBelow, type PictureWords } from './svg.js';

/** One curve: evenly spaced values from `firstX` on. Dashes tell curves apart without colour. */
export interface Curve {
  readonly name: string;
  readonly values: ArrayLike<number>;
  readonly firstX: number;
  readonly stepX: number;
}

export interface LineChart extends PictureWords {
  readonly xLabel: string;
  readonly yLabel: string;
  readonly curves: readonly Curve[];
}

const size = { width: 460, height: 280, left: 52, right: 14, bottom: 40 };
const dashes = ['', '7 4', '2 3', '10 3 2 3', '1 5', '14 4'];

/** A line chart as SVG text: drawn in the page's own ink, readable in greyscale, with its words for screen readers. */
export function lineChart(chart: LineChart): string {
  // The legend stands above the curves, two names a line.
  const top = 14 + 16 * Math.ceil(chart.curves.length / 2);
  const xs = chart.curves.flatMap((c) => [
    c.firstX,
    c.firstX + c.stepX * Math.max(1, c.values.length - 1),
  ]);
  const highest = Math.max(1e-9, ...chart.curves.flatMap((c) => Array.from(c.values)));
  const x = scaleLinear()
    .domain([Math.min(...xs), Math.max(...xs)])
    .range([size.left, size.width - size.right]);
  const y = scaleLinear()
    .domain([0, highest])
    .nice(4)
    .range([size.height - size.bottom, top]);
  const bottom = size.height - size.bottom;
  const yTicks = y
    .ticks(4)
    .map(
      (t) =>
        `<g transform="translate(${size.left},${r(y(t))})"><line x2="${size.width - size.left - size.right}" stroke="currentColor" opacity="0.2"/><text x="-6" dy="4" text-anchor="end">${t}</text></g>`,
    );
  const curves = chart.curves.map((curve, n) => {
    const path =
      line<number>(
        (_, i) => r(x(curve.firstX + curve.stepX * i)),
        (v) => r(y(v)),
      )(Array.from(curve.values)) ?? '';
    return `<path d="${path}" fill="none" stroke="currentColor" stroke-width="2" stroke-dasharray="${dashes[n % dashes.length]}"><title>${escaped(curve.name)}</title></path>`;
  });
  const legend = chart.curves.map((curve, n) => {
    const at = `translate(${size.left + (n % 2) * 200},${10 + 16 * Math.floor(n / 2)})`;
    return `<g transform="${at}"><line x2="28" stroke="currentColor" stroke-width="2" stroke-dasharray="${dashes[n % dashes.length]}"/><text x="34" dy="4">${escaped(curve.name)}</text></g>`;
  });
  return picture(chart, size, [
    ...yTicks,
    ...ticksBelow(x, 6, bottom),
    `<line x1="${size.left}" x2="${size.width - size.right}" y1="${bottom}" y2="${bottom}" stroke="currentColor"/>`,
    ...curves,
    ...legend,
    `<text x="${(size.left + size.width) / 2}" y="${size.height - 6}" text-anchor="middle">${escaped(chart.xLabel)}</text>`,
    `<text transform="translate(12,${(top + bottom) / 2}) rotate(-90)" text-anchor="middle">${escaped(chart.yLabel)}</text>`,
  ]);
}
