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
  /** A rise and a fall in words; the size of the change goes to {change}, the values to {now} and {then}. */
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

/** Things counted, a change said the same way up and down. */
const counted = (what: string): readonly [string, string] => [
  `{change} more ${what}: {now} instead of {then}`,
  `{change} fewer ${what}: {now} instead of {then}`,
];

/** A span that a part of the patients stay within. */
const within = (who: string, unit: string): readonly [string, string] => [
  `${who} {now} ${unit} instead of {then}: {change} ${unit} more`,
  `${who} {now} ${unit} instead of {then}: {change} ${unit} less`,
];

export const measureWords: Readonly<Record<Measure, MeasureWords>> = {
  patientsPerDay: measure(
    'Patients served',
    'a day',
    'more',
    'Emergencies and those who come back included: who comes twice counts twice.',
    counted('patients a day are served'),
  ),
  diagnosticPerDay: measure(
    'Questions answered diagnostically',
    'a day',
    'more',
    'Each clinical question counts once, however many visits it took.',
    counted('questions a day are answered diagnostically'),
  ),
  belowDiagnosticPerDay: measure(
    'Questions left below diagnostic',
    'a day',
    'less',
    'Targeted (this question only), screening-grade (not diagnostic) or not answered: still owed. A question left open at two visits counts twice.',
    counted('questions a day stay below diagnostic'),
  ),
  quickLookOnlyShare: measure(
    'Left with quick looks only (not diagnostic)',
    '%',
    'less',
    'Of the patients served, those who leave with something seen and nothing diagnostic; an exam that was broken off before counts too.',
    counted('patients in a hundred leave with quick looks only (not diagnostic)'),
  ),
  followUpsPerDay: measure(
    'Exams that come back',
    'a day',
    'less',
    'Asked for again because answers are owed.',
    counted('exams a day come back because answers are owed'),
  ),
  overtimeMinPerDay: measure(
    'Overtime',
    'min a day',
    'less',
    'Minutes past closing, all scanners together. A mean: a single day can be far worse.',
    counted('minutes of overtime a day, all scanners together'),
  ),
  overrunShare: measure(
    'Exams longer than their slot',
    '%',
    'less',
    'Of the booked exams, those that take the scanner longer than their slot, with the coil change and the wait for the cannula before them.',
    counted('booked exams in a hundred run longer than their slot'),
  ),
  waitMedianMin: measure(
    'Waiting on the day, half within',
    'min',
    'less',
    'From the appointment, or a later arrival, to the start. Who is sent home is not counted.',
    within('Half of the patients wait no longer than', 'min'),
  ),
  waitNinetiethMin: measure(
    'Waiting on the day, 9 of 10 within',
    'min',
    'less',
    'Nine of ten patients wait no longer than this; one of ten waits longer.',
    within('Nine of ten patients wait no longer than', 'min'),
  ),
  idleMinPerScannerDay: measure(
    'Scanner standing empty',
    'min a day',
    'neither',
    'Open minutes without a patient, a scanner and day. Fewer are not better as such: empty minutes are what takes up a delay.',
    [
      'Each scanner stands empty {change} min a day longer: {now} instead of {then}',
      'Each scanner stands empty {change} min a day less: {now} instead of {then}',
    ],
  ),
  repeatShare: measure(
    'Exams with a repeat',
    '%',
    'less',
    'A whole sequence had to be run again.',
    counted('exams in a hundred have a sequence run again'),
  ),
  brokenOffShare: measure(
    'Broken off by the patient',
    '%',
    'less',
    'The patient asked to come out.',
    counted('exams in a hundred are broken off by the patient'),
  ),
  cutShortShare: measure(
    'Cut short because the time was over',
    '%',
    'less',
    'Something was left out or taken quickly. Always 0 where the scenario lets every exam finish.',
    counted('exams in a hundred are cut short because the time is over'),
  ),
  sentHomePerDay: measure(
    'Sent home',
    'a day',
    'less',
    'Came and could not be started before the end of overtime; emergencies that others had to take over count too.',
    counted('patients a day are sent home unserved'),
    2,
  ),
  cannotTakePerDay: measure(
    'Cannot be taken here',
    'a day',
    'less',
    'Asked for, and no scanner of the scenario has the coil or can answer anything: never on the list.',
    counted('requests a day cannot be taken here'),
  ),
  noShowsPerDay: measure(
    'Did not come',
    'a day',
    'neither',
    'Booked and did not come; more bookings alone make more of them.',
    counted('patients a day do not come'),
  ),
  daysWaitedMedian: measure(
    'From request to exam, half within',
    'working days',
    'less',
    'First visits that took place, emergencies not counted. Who still waits is not counted, so a growing list looks better here than it is.',
    within('Half of the first visits take place within', 'working days'),
  ),
  listAtEnd: measure(
    'Waiting list at the end of the month',
    'requests',
    'less',
    'Requests not served yet, those that come back included.',
    [
      'The waiting list ends the month at {now} instead of {then}: {change} more',
      'The waiting list ends the month at {now} instead of {then}: {change} fewer',
    ],
    0,
  ),
  emergencyWaitMedianMin: measure(
    'Emergencies wait, half within',
    'min',
    'less',
    'From arrival to the start. Those that others had to take over are not counted.',
    within('Half of the emergencies wait no longer than', 'min'),
  ),
};

/** A value as printed, without its unit. */
export function measureFigure(name: Measure, value: number): string {
  const { times, digits } = measureWords[name];
  if (!Number.isFinite(value)) return '?';
  const figure = (value * times).toFixed(digits);
  return Number(figure) === 0 ? (0).toFixed(digits) : figure;
}
