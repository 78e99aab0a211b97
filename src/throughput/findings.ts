import type { Estimate, Estimates } from './estimate.js';
import { measureFigure, measureWords } from './measure-words.js';
import type { Measure } from './month-record.js';

/** One sentence on what a scenario changes, and whether that is for the better. */
export interface Finding {
  readonly measure: Measure;
  readonly verdict: 'better' | 'worse' | 'unchanged' | 'changed';
  readonly sentence: string;
}

/** Measures that findings speak about, most telling first. */
const spoken: readonly Measure[] = [
  'diagnosticPerDay',
  'patientsPerDay',
  'belowDiagnosticPerDay',
  'quickLookOnlyShare',
  'followUpsPerDay',
  'overtimeMinPerDay',
  'overrunShare',
  'waitNinetiethMin',
  'idleMinPerScannerDay',
  'listAtEnd',
  'sentHomePerDay',
];

/**
 * What a scenario changes against another in plain words, better and worse alike; what the simulated days cannot tell
 * from nothing is said to be unchanged within them.
 *
 * @param days working days both were simulated for
 */
export function findingsOf(
  name: string,
  against: string,
  differences: Estimates,
  days: number,
): readonly Finding[] {
  const found = spoken.map((measure): Finding => {
    const { better } = measureWords[measure];
    const difference = differences[measure];
    const verdict = verdictOf(difference, better);
    return { measure, verdict, sentence: sentenceOf(measure, difference, verdict) };
  });
  const unchanged = found.filter((f) => f.verdict === 'unchanged');
  const changed = found.filter((f) => f.verdict !== 'unchanged');
  const start = (finding: Finding) => ({
    ...finding,
    sentence: `${name} against ${against}: ${finding.sentence}`,
  });
  const rest: readonly Finding[] =
    unchanged.length === 0
      ? []
      : [
          {
            measure: unchanged[0]!.measure,
            verdict: 'unchanged',
            sentence: `Unchanged within what ${days} days can tell: ${unchanged
              .map((f) => lower(measureWords[f.measure].name))
              .join('; ')}.`,
          },
        ];
  return [...changed.map(start), ...rest];
}

function verdictOf({ low, high, mean }: Estimate, better: string): Finding['verdict'] {
  if (low <= 0 && high >= 0) return 'unchanged';
  if (better === 'neither') return 'changed';
  return mean > 0 === (better === 'more') ? 'better' : 'worse';
}

function sentenceOf(measure: Measure, { mean, low, high }: Estimate, verdict: string): string {
  const { name, unit } = measureWords[measure];
  const size = (value: number) => measureFigure(measure, Math.abs(value));
  const [near, far] = mean > 0 ? [low, high] : [-high, -low];
  const units = unit === '%' ? 'percentage points' : unit;
  const word = mean > 0 ? 'more' : 'fewer';
  const direction =
    unit === 'a day' || unit === 'requests'
      ? `${size(mean)} ${word}${unit === 'a day' ? ' a day' : ''}`
      : `${size(mean)} ${units} ${mean > 0 ? 'more' : 'less'}`;
  return `${lower(name)}: ${direction} (${size(near)} to ${size(far)})${verdict === 'worse' ? ', which is worse' : ''}.`;
}

const lower = (text: string) => text.charAt(0).toLowerCase() + text.slice(1);
