import colour from 'picocolors';
import {
  measureFigure,
  measureWords,
  type Comparison,
  type Measure,
} from '../../throughput/index.js';
import { wrapped } from './layout.js';
import { monthBars } from './month-bars.js';

const measures = Object.keys(measureWords) as Measure[];

/** A comparison for an 80-column terminal: figures with limits, then what changes in words. */
export function monthText(comparison: Comparison): string {
  const { scenarios, days, stopped } = comparison;
  const lines: string[] = [];
  if (stopped) lines.push(colour.bold('Stopped early: what follows rests on the months done.'), '');
  lines.push(
    wrapped(
      `${days} working days each, the same patients for all. Every figure with its 95 % limits.`,
      '',
    ),
  );
  lines.push('', monthBars(comparison));
  scenarios.forEach(({ name, estimates, findings, leftOut }, n) => {
    lines.push('', colour.bold(`${n + 1}. ${name}`));
    for (const measure of measures) {
      const { name: what, unit } = measureWords[measure];
      const { mean, low, high } = estimates[measure];
      const [m, l, h] = [mean, low, high].map((v) => measureFigure(measure, v));
      lines.push(`   ${what.padEnd(38)} ${m!.padStart(7)} ${unit.padEnd(9)} (${l} to ${h})`);
    }
    if (findings.length > 0)
      lines.push('', `   Against "${scenarios[0]!.name}" (+ better, - worse, = neither)`);
    for (const { sentence, verdict } of findings) {
      const mark = verdict === 'better' ? '+' : verdict === 'worse' ? '-' : '=';
      lines.push(wrapped(sentence, `   ${mark} `, '     '));
    }
    if (leftOut.length > 0)
      lines.push(wrapped(`No scanner can take: ${leftOut.join('; ')}.`, '   ! ', '     '));
  });
  return lines.join('\n');
}
