import { scaleLinear } from 'd3-scale';
import { picture, r, ticksBelow } from './svg.js';

/** How long an exam keeps the table, against its slot; seconds. */
export interface TableTimes {
  readonly tenthS: number;
  readonly medianS: number;
  readonly ninetiethS: number;
  readonly slotS: number;
}

const size = { width: 460, height: 92 };
const axisY = 56;
const barY = 26;
const barHeight = 18;

/**
 * Table time as a bar from the tenth to the ninetieth percentile with the median across it, and the end of the
 * slot. What reaches beyond the slot is drawn as an empty, dashed box, so that it needs no colour.
 */
export function tableTimeChart(times: TableTimes): string {
  const [low, middle, high, slot] = [
    times.tenthS,
    times.medianS,
    times.ninetiethS,
    times.slotS,
  ].map((s) => s / 60) as [number, number, number, number];
  const x = scaleLinear()
    .domain([0, Math.max(slot, high) * 1.08])
    .range([8, size.width - 8]);
  const box = (from: number, to: number, look: string) =>
    to > from
      ? [
          `<rect x="${r(x(from))}" y="${barY}" width="${r(x(to) - x(from))}" height="${barHeight}" stroke="currentColor" ${look}/>`,
        ]
      : [];
  const across = (at: number, from: number, to: number, width: number) =>
    `<line x1="${r(x(at))}" x2="${r(x(at))}" y1="${from}" y2="${to}" stroke="currentColor" stroke-width="${width}"/>`;
  return picture(
    {
      title: 'Table time against the slot',
      description: `8 in 10 such exams take between ${minutes(low)} and ${minutes(high)} with getting in and out, half of them less than ${minutes(middle)}; the slot ends at ${minutes(slot)}.`,
    },
    size,
    [
      ...ticksBelow(x, 8, axisY),
      `<line x1="8" x2="${size.width - 8}" y1="${axisY}" y2="${axisY}" stroke="currentColor"/>`,
      ...box(low, Math.min(high, slot), 'fill="currentColor" fill-opacity="0.3"'),
      ...box(Math.max(low, slot), high, 'fill="none" stroke-dasharray="4 3"'),
      across(middle, barY - 3, barY + barHeight + 3, 4),
      across(slot, 18, axisY, 2),
      `<text x="${r(x(slot))}" y="12" text-anchor="${slot > high / 2 ? 'end' : 'start'}">slot ends</text>`,
      `<text x="${size.width / 2}" y="${size.height - 4}" text-anchor="middle">minutes with getting in and out; bar: 8 in 10; thick line: median</text>`,
    ],
  );
}

const minutes = (value: number) => `${Math.round(value)} min`;
