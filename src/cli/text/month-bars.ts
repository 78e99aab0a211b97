import {
  measureFigure,
  measureWords,
  type Comparison,
  type Measure,
} from '../../throughput/index.js';
import { fitted } from './layout.js';

/** Measures drawn as bars, the gains first, then what they cost. */
const drawn: readonly Measure[] = [
  'diagnosticPerDay',
  'belowDiagnosticPerDay',
  'quickLookOnlyShare',
  'overtimeMinPerDay',
  'waitNinetiethMin',
];
const barWidth = 20;
const nameWidth = 45;

/** The comparison drawn with characters: one bar a scenario, to scale within a measure, with its figure. */
export function monthBars({ scenarios }: Comparison): string {
  return drawn
    .map((measure) => {
      const { name, unit } = measureWords[measure];
      const means = scenarios.map((s) => s.estimates[measure].mean);
      const top = Math.max(1e-9, ...means.filter(Number.isFinite));
      const rows = scenarios.map((s, n) => {
        const { mean } = s.estimates[measure];
        const bar = Number.isFinite(mean)
          ? '#'.repeat(Math.round((barWidth * Math.max(0, mean)) / top))
          : '';
        return `  ${n + 1} ${fitted(s.name, nameWidth)} ${bar.padEnd(barWidth)} ${measureFigure(measure, mean).padStart(6)}`;
      });
      return [`${name}, ${unit}`, ...rows].join('\n');
    })
    .join('\n');
}
