import type { Estimate, Estimates } from './estimate.js';
import { measureFigure, measureWords } from './measure-words.js';
import type { Measure } from './month-record.js';

/** One sentence on what a scenario changes, and whether that is for the better. */
export interface Finding {
  readonly measure: Measure;
  readonly verdict: 'better' | 'worse' | 'unchanged' | 'changed';
  readonly sentence: string;
}

/** What a difference rests on: the same months of both. */
export interface FindingGround {
  readonly before: Estimates;
  readonly after: Estimates;
  readonly months: number;
  /** Working days in these months. */
  readonly days: number;
}

/** Measures that findings speak about, most telling first. */
const spoken: readonly Measure[] = [
  'diagnosticPerDay',
  'patientsPerDay',
  'belowDiagnosticPerDay',
  'quickLookOnlyShare',
  'followUpsPerDay',
  'cutShortShare',
  'overtimeMinPerDay',
  'overrunShare',
  'waitNinetiethMin',
  'emergencyWaitMedianMin',
  'sentHomePerDay',
  'listAtEnd',
  'idleMinPerScannerDay',
];

/**
 * What a scenario changes against another in plain words, better and worse alike; what the simulated days cannot tell from
 * chance, and what is too small to print, is named together at the end.
 */
export function findingsOf(differences: Estimates, ground: FindingGround): readonly Finding[] {
  const [first] = spoken;
  if (ground.months < 2)
    return [
      {
        ...{ measure: first!, verdict: 'unchanged' },
        sentence: 'One month alone cannot tell a change from chance: simulate two or more.',
      },
    ];
  const found = spoken.map((measure) => ({ measure, verdict: verdictOf(measure, differences) }));
  const told = found
    .filter((f) => f.verdict !== 'unchanged')
    .map((f): Finding => ({ ...f, sentence: sentenceOf(f.measure, differences, ground) }));
  const rest = found.filter((f) => f.verdict === 'unchanged');
  if (rest.length === 0) return told;
  const names = rest.map((f) => lowered(measureWords[f.measure].name)).join('; ');
  const sentence = `No difference, or none beyond chance, in ${ground.days} simulated days: ${names}.`;
  return [...told, { measure: rest[0]!.measure, verdict: 'unchanged', sentence }];
}

function verdictOf(measure: Measure, differences: Estimates): Finding['verdict'] {
  const { low, high, mean } = differences[measure];
  const { better } = measureWords[measure];
  // Written so that a measure no month says anything of is not told apart either.
  if (!(low > 0 || high < 0)) return 'unchanged';
  if (Number(measureFigure(measure, mean)) === 0) return 'unchanged';
  if (better === 'neither') return 'changed';
  return mean > 0 === (better === 'more') ? 'better' : 'worse';
}

function sentenceOf(
  measure: Measure,
  differences: Estimates,
  { before, after }: FindingGround,
): string {
  const [more, less] = measureWords[measure].change;
  const [now, then] = [after, before].map((e) => measureFigure(measure, e[measure].mean));
  const words = differences[measure].mean > 0 ? more : less;
  return `${words
    .replace('{change}', sizeOf(measure, differences[measure]))
    .replace('{now}', now!)
    .replace('{then}', then!)}.`;
}

/** The change without its sign, with its limits behind it. */
function sizeOf(measure: Measure, { mean, low, high }: Estimate): string {
  const size = (value: number) => measureFigure(measure, Math.abs(value));
  const [near, far] = mean > 0 ? [low, high] : [high, low];
  return `${size(mean)} (${size(near)} to ${size(far)})`;
}

const lowered = (text: string) => text.charAt(0).toLowerCase() + text.slice(1);
