import type { Measure } from './month-record.js';

/** How a measure is named, counted and judged. */
export interface MeasureWords {
  readonly name: string;
  /** What it counts and where it may mislead, for somebody who is no statistician. */
  readonly means: string;
  readonly unit: 'a day' | 'min a day' | 'min' | '%' | 'working days' | 'requests';
  readonly better: 'more' | 'less' | 'neither';
  /** Factor from the recorded value to the printed one. */
  readonly times: number;
  /** Decimals printed. */
  readonly digits: number;
  /** A rise and a fall in words; the size of the change stands at {}. */
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

/** A change said the same way up and down. */
const either = (words: (more: string) => string): readonly [string, string] => [
  words('more'),
  words('fewer'),
];

export const measureWords: Readonly<Record<Measure, MeasureWords>> = {
  patientsPerDay: measure(
    'Patients served',
    'a day',
    'more',
    'Emergencies and those who come back included: who comes twice counts twice.',
    either((more) => `{} ${more} patients are served a day`),
  ),
  diagnosticPerDay: measure(
    'Questions answered diagnostically',
    'a day',
    'more',
    'Each clinical question counts once, however many visits it took.',
    either((more) => `{} ${more} questions are answered diagnostically a day`),
  ),
  belowDiagnosticPerDay: measure(
    'Questions left below diagnostic',
    'a day',
    'less',
    'Targeted (this question only), screening-grade (not diagnostic) or not answered: still owed. A question left open at two visits counts twice.',
    either((more) => `{} ${more} questions are left below diagnostic a day, and stay owed`),
  ),
  quickLookOnlyShare: measure(
    'Left with quick looks only (not diagnostic)',
    '%',
    'less',
    'Of the patients served, those who leave with something seen and nothing diagnostic.',
    either(
      (more) => `{} ${more} patients in a hundred leave with quick looks only (not diagnostic)`,
    ),
  ),
  followUpsPerDay: measure(
    'Exams that come back',
    'a day',
    'less',
    'Asked for again because answers are owed.',
    either((more) => `{} ${more} exams come back a day because answers are owed`),
  ),
  overtimeMinPerDay: measure(
    'Overtime',
    'min a day',
    'less',
    'Minutes past closing, all scanners together. A mean: a single day can be far worse.',
    either((more) => `{} ${more} minutes of overtime a day, all scanners together`),
  ),
  overrunShare: measure(
    'Exams longer than their slot',
    '%',
    'less',
    'Of the booked exams, those that take the scanner longer than their slot, with the coil change and the wait for the cannula before them.',
    either((more) => `{} ${more} booked exams in a hundred run longer than their slot`),
  ),
  waitMedianMin: measure(
    'Waiting on the day, half within',
    'min',
    'less',
    'From the appointment, or a later arrival, to the start. Who is sent home is not counted.',
    [
      'The wait that half of the patients stay within grows by {} min',
      'The wait that half of the patients stay within shrinks by {} min',
    ],
  ),
  waitNinetiethMin: measure(
    'Waiting on the day, 9 of 10 within',
    'min',
    'less',
    'Nine of ten patients wait no longer than this; one of ten waits longer.',
    [
      'The wait that nine of ten patients stay within grows by {} min',
      'The wait that nine of ten patients stay within shrinks by {} min',
    ],
  ),
  idleMinPerScannerDay: measure(
    'Scanner standing empty',
    'min a day',
    'neither',
    'Open minutes without a patient, a scanner and day. Fewer are not better as such: empty minutes are what takes up a delay.',
    [
      'Each scanner stands empty {} min longer a day',
      'Each scanner stands empty {} min less a day',
    ],
  ),
  repeatShare: measure(
    'Exams with a repeat',
    '%',
    'less',
    'A whole sequence had to be run again.',
    either((more) => `{} ${more} exams in a hundred have a sequence run again`),
  ),
  brokenOffShare: measure(
    'Broken off by the patient',
    '%',
    'less',
    'The patient asked to come out.',
    either((more) => `{} ${more} exams in a hundred are broken off by the patient`),
  ),
  cutShortShare: measure(
    'Cut short because the time was over',
    '%',
    'less',
    'Something was left out or taken quickly. Always 0 where the scenario lets every exam finish.',
    either((more) => `{} ${more} exams in a hundred are cut short because the time is over`),
  ),
  sentHomePerDay: measure(
    'Sent home',
    'a day',
    'less',
    'Came and could not be started before the end of overtime; emergencies that others had to take over count too.',
    either((more) => `{} ${more} patients are sent home unserved a day`),
    2,
  ),
  noShowsPerDay: measure(
    'Did not come',
    'a day',
    'neither',
    'Booked and did not come; more bookings alone make more of them.',
    either((more) => `{} ${more} patients do not come a day`),
  ),
  daysWaitedMedian: measure(
    'From request to exam, half within',
    'working days',
    'less',
    'First visits that took place, emergencies not counted. Who still waits is not counted, so a growing list looks better here than it is.',
    [
      'The time from request to exam that half stay within grows by {} working days',
      'The time from request to exam that half stay within shrinks by {} working days',
    ],
  ),
  listAtEnd: measure(
    'Waiting list at the end of the month',
    'requests',
    'less',
    'Requests not served yet, those that come back included.',
    [
      'The waiting list at the end of the month is longer by {}',
      'The waiting list at the end of the month is shorter by {}',
    ],
    0,
  ),
  emergencyWaitMedianMin: measure(
    'Emergencies wait, half within',
    'min',
    'less',
    'From arrival to the start. Those that others had to take over are not counted.',
    [
      'The wait that half of the emergencies stay within grows by {} min',
      'The wait that half of the emergencies stay within shrinks by {} min',
    ],
  ),
};

/** A value as printed, without its unit. */
export function measureFigure(name: Measure, value: number): string {
  const { times, digits } = measureWords[name];
  if (!Number.isFinite(value)) return '?';
  const figure = (value * times).toFixed(digits);
  return Number(figure) === 0 ? (0).toFixed(digits) : figure;
}
