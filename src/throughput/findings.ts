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
export function findingsOf(differences: Estimates, days: number): readonly Finding[] {
  const found = spoken.map((measure): Finding => {
    const { better } = measureWords[measure];
    const difference = differences[measure];
    const verdict = verdictOf(difference, better);
    return { measure, verdict, sentence: sentenceOf(measure, difference) };
  });
  const unchanged = found.filter((f) => f.verdict === 'unchanged');
  const changed = found.filter((f) => f.verdict !== 'unchanged');
  if (unchanged.length === 0) return changed;
  const names = unchanged.map((f) => lowered(measureWords[f.measure].name)).join('; ');
  return [
    ...changed,
    {
      measure: unchanged[0]!.measure,
      verdict: 'unchanged',
      sentence: `Unchanged within what ${days} days can tell: ${names}.`,
    },
  ];
}

function verdictOf({ low, high, mean }: Estimate, better: string): Finding['verdict'] {
  if (low <= 0 && high >= 0) return 'unchanged';
  if (better === 'neither') return 'changed';
  return mean > 0 === (better === 'more') ? 'better' : 'worse';
}

function sentenceOf(measure: Measure, { mean, low, high }: Estimate): string {
  const { change } = measureWords[measure];
  const size = (value: number) => measureFigure(measure, Math.abs(value));
  const [near, far] = mean > 0 ? [low, high] : [high, low];

  const words = `${change[0]} ${size(mean)} ${mean > 0 ? 'more' : 'fewer'} ${change[1]}`;
  return `${words.charAt(0).toUpperCase()}${words.slice(1)} (${size(near)} to ${size(far)}).`;
}

const lowered = (text: string) => text.charAt(0).toLowerCase() + text.slice(1);
