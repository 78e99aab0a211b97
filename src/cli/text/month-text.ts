import colour from 'picocolors';
import {
  measureFigure,
  measureWords,
  type Comparison,
  type Finding,
  type Measure,
} from '../../throughput/index.js';
import { wrapped } from './layout.js';
import { monthBars } from './month-bars.js';

const measures = Object.keys(measureWords) as Measure[];

const marks: Readonly<Record<Finding['verdict'], string>> = {
  ...{ better: '+', worse: '-', changed: '~', unchanged: '?' },
};

/** A comparison for an 80-column terminal: figures with limits, then what changes in words. */
export function monthText(comparison: Comparison): string {
  const { scenarios, days, stopped } = comparison;
  const lines: string[] = [];
  if (stopped) lines.push(colour.bold('Stopped early: what follows rests on the months done.'), '');
  lines.push(
    wrapped(
      `${days} working days each, the same patients for all where the seeds are the same. In brackets: 95 % limits, for chance alone; whether the numbers a scenario was described with are right they cannot say. Quick looks are not diagnostic: what they leave open stays owed.`,
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
      lines.push(`   ${what.padEnd(43)} ${m!.padStart(6)} ${unit.padEnd(9)} (${l} to ${h})`);
    }
    if (findings.length > 0)
      lines.push(
        '',
        `   Against "${scenarios[0]!.name}" (+ better, - worse, ~ different, ? undecided)`,
      );
    for (const { sentence, verdict } of findings) {
      lines.push(wrapped(sentence, `   ${marks[verdict]} `, '     '));
    }
    if (leftOut.length > 0)
      lines.push(wrapped(`No scanner can take: ${leftOut.join('; ')}.`, '   ! ', '     '));
  });
  return lines.join('\n');
}
