import { scaleLinear } from 'd3-scale';
import { escaped, picture, r, ticksBelow, type PictureWords } from './svg.js';

/** A curve that falls in steps, from 1 at 0. */
export interface StepChart extends PictureWords {
  readonly xLabel: string;
  readonly yLabel: string;
  /** Right end of the horizontal axis. */
  readonly toX: number;
  readonly steps: {
    readonly name: string;
    /** Height from each place on. */
    readonly points: readonly { readonly x: number; readonly y: number }[];
    /** The curve is not known beyond. */
    readonly endX: number;
    /** Short strokes on the curve. */
    readonly ticksX: readonly number[];
  };
  readonly smooth: { readonly name: string; readonly at: (x: number) => number };
  /** A bar from low to high across the steps, named. */
  readonly limits?: {
    readonly name: string;
    readonly x: number;
    readonly low: number;
    readonly high: number;
  };
}

const size = { width: 460, height: 300, left: 64, right: 14, bottom: 40, top: 62 };
const smoothPieces = 80;

/** A step curve, a smooth one in dashes and a bar of limits, in the page's own ink. */
export function stepChart(chart: StepChart): string {
  const bottom = size.height - size.bottom;
  const { steps, smooth, limits, toX } = chart;
  const x = scaleLinear()
    .domain([0, toX])
    .range([size.left, size.width - size.right]);
  const y = scaleLinear().domain([0, 1]).range([bottom, size.top]);
  const heightAt = (at: number) => steps.points.findLast((p) => p.x <= at)?.y ?? 1;
  const endX = Math.min(steps.endX, toX);
  const path = [
    `M${r(x(0))},${r(y(1))}`,
    ...steps.points.filter((p) => p.x <= toX).flatMap((p) => [`H${r(x(p.x))}`, `V${r(y(p.y))}`]),
    `H${r(x(endX))}`,
  ].join('');
  const dashes = Array.from({ length: smoothPieces + 1 }, (_, n) => {
    const at = (toX * n) / smoothPieces;
    return `${n === 0 ? 'M' : 'L'}${r(x(at))},${r(y(smooth.at(at)))}`;
  }).join('');
  // Many end at the same time: one stroke each is enough.
  const ticks = [...new Set(steps.ticksX.filter((t) => t <= toX).map((t) => r(x(t))))].map((at) => {
    const height = r(y(heightAt(x.invert(at))));
    return `<line x1="${at}" x2="${at}" y1="${height - 5}" y2="${height + 5}" stroke="currentColor"/>`;
  });
  const yTicks = [0, 0.25, 0.5, 0.75, 1].map(
    (t) =>
      `<g transform="translate(${size.left},${r(y(t))})"><line x2="${size.width - size.left - size.right}" stroke="currentColor" opacity="0.2"/><text x="-6" dy="4" text-anchor="end">${100 * t} %</text></g>`,
  );
  const bar = (at: string, low: number, high: number) =>
    `<g stroke="currentColor" stroke-width="2"><line x1="${at}" x2="${at}" y1="${low}" y2="${high}"/><line x1="${Number(at) - 5}" x2="${Number(at) + 5}" y1="${low}" y2="${low}"/><line x1="${Number(at) - 5}" x2="${Number(at) + 5}" y1="${high}" y2="${high}"/></g>`;
  const legend = (line: number, drawn: string, name: string) =>
    `<g transform="translate(${size.left},${10 + 17 * line})">${drawn}<text x="38" dy="4">${escaped(name)}</text></g>`;
  return picture(chart, size, [
    ...yTicks,
    ...ticksBelow(x, 6, bottom),
    `<line x1="${size.left}" x2="${size.width - size.right}" y1="${bottom}" y2="${bottom}" stroke="currentColor"/>`,
    `<path d="${dashes}" fill="none" stroke="currentColor" stroke-width="2" stroke-dasharray="6 5"><title>${escaped(smooth.name)}</title></path>`,
    `<path d="${path}" fill="none" stroke="currentColor" stroke-width="2"><title>${escaped(steps.name)}</title></path>`,
    ...ticks,
    ...(limits === undefined
      ? []
      : [bar(String(r(x(Math.min(limits.x, toX)))), r(y(limits.low)), r(y(limits.high)))]),
    legend(0, '<line x2="30" stroke="currentColor" stroke-width="2"/>', steps.name),
    legend(
      1,
      '<line x2="30" stroke="currentColor" stroke-width="2" stroke-dasharray="6 5"/>',
      smooth.name,
    ),
    ...(limits === undefined ? [] : [legend(2, bar('15', -5, 5), limits.name)]),
    `<text x="${(size.left + size.width) / 2}" y="${size.height - 6}" text-anchor="middle">${escaped(chart.xLabel)}</text>`,
    `<text transform="translate(12,${(size.top + bottom) / 2}) rotate(-90)" text-anchor="middle">${escaped(chart.yLabel)}</text>`,
  ]);
}
