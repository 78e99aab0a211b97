import type { Measure } from './month-record.js';

/** How a measure is named, counted and judged. */
export interface MeasureWords {
  readonly name: string;
  /** What it says exactly, one sentence. */
  readonly means: string;
  readonly unit: 'a day' | 'min a day' | 'min' | '%' | 'days' | 'requests';
  readonly better: 'more' | 'less' | 'neither';
  /** Factor from the recorded value to the printed one. */
  readonly times: number;
  /** Decimals printed. */
  readonly digits: number;
  /** What a change of it is called: what goes before and after the figure with "more" or "fewer". */
  readonly change: readonly [string, string];
}

const measure = (
  name: string,
  unit: MeasureWords['unit'],
  better: MeasureWords['better'],
  means: string,
  change: readonly [string, string],
  digits = 1,
): MeasureWords => ({ name, means, unit, better, times: unit === '%' ? 100 : 1, digits, change });

export const measureWords: Readonly<Record<Measure, MeasureWords>> = {
  patientsPerDay: measure(
    'Patients served',
    'a day',
    'more',
    'Emergencies and follow-ups included.',
    ['serves', 'patients a day'],
  ),
  diagnosticPerDay: measure(
    'Questions answered diagnostically',
    'a day',
    'more',
    'Each clinical question counts once, however many visits it took.',
    ['answers', 'questions diagnostically a day'],
  ),
  belowDiagnosticPerDay: measure(
    'Questions left below diagnostic',
    'a day',
    'less',
    'Targeted (this question only), screening-grade (not diagnostic) or not answered: still owed.',
    ['leaves', 'questions below diagnostic a day'],
  ),
  quickLookOnlyShare: measure(
    'Left with quick looks only',
    '%',
    'less',
    'Patients who leave with something seen and nothing diagnostic.',
    ['sends', 'patients in a hundred away with quick looks only (not diagnostic)'],
  ),
  followUpsPerDay: measure(
    'Exams coming back',
    'a day',
    'less',
    'Exams asked for again because answers are owed.',
    ['makes', 'exams come back a day'],
  ),
  overtimeMinPerDay: measure(
    'Overtime',
    'min a day',
    'less',
    'Minutes past closing, all scanners together.',
    ['needs', 'minutes of overtime a day'],
  ),
  overrunShare: measure(
    'Exams longer than their slot',
    '%',
    'less',
    'Of the booked exams, those that take the scanner longer than the slot.',
    ['lets', 'exams in a hundred run longer than their slot'],
  ),
  waitMedianMin: measure(
    'Waiting on the day, median',
    'min',
    'less',
    'From the appointment, or a later arrival, to the start.',
    ['makes half of the patients wait', 'minutes'],
  ),
  waitNinetiethMin: measure(
    'Waiting on the day, 9 of 10',
    'min',
    'less',
    'Nine of ten patients wait no longer than this.',
    ['makes nine of ten patients wait up to', 'minutes'],
  ),
  idleMinPerScannerDay: measure(
    'Scanner standing empty',
    'min a day',
    'neither',
    'Open minutes without a patient, a scanner and day.',
    ['leaves each scanner empty for', 'minutes a day'],
  ),
  repeatShare: measure(
    'Exams with a repeat',
    '%',
    'less',
    'A whole sequence had to be run again.',
    ['repeats sequences in', 'exams in a hundred'],
  ),
  brokenOffShare: measure(
    'Broken off by the patient',
    '%',
    'less',
    'The patient asked to come out.',
    ['has', 'exams in a hundred broken off'],
  ),
  cutShortShare: measure(
    'Cut short at the end of the slot',
    '%',
    'less',
    'Something was left out or taken quickly because the time was over.',
    ['cuts short', 'exams in a hundred'],
  ),
  sentHomePerDay: measure(
    'Sent home',
    'a day',
    'less',
    'Came and could not be started before the end of overtime.',
    ['sends home', 'patients a day'],
    2,
  ),
  noShowsPerDay: measure('Did not come', 'a day', 'neither', 'Booked and did not come.', [
    'has',
    'patients a day who do not come',
  ]),
  daysWaitedMedian: measure(
    'Days from request to exam, median',
    'days',
    'less',
    'First visits only, emergencies not counted.',
    ['makes half of the requests wait', 'days'],
  ),
  listAtEnd: measure(
    'Waiting list at the end of the month',
    'requests',
    'less',
    'Requests not served yet, follow-ups included.',
    ['ends the month with', 'requests on the list'],
    0,
  ),
  emergencyWaitMedianMin: measure(
    'Emergencies wait, median',
    'min',
    'less',
    'From arrival to the start.',
    ['makes half of the emergencies wait', 'minutes'],
  ),
};

/** A value as printed, without its unit. */
export function measureFigure(name: Measure, value: number): string {
  const { times, digits } = measureWords[name];
  if (!Number.isFinite(value)) return '?';
  const figure = (value * times).toFixed(digits);
  return Number(figure) === 0 ? (0).toFixed(digits) : figure;
}
