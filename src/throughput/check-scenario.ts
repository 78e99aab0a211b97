import type { Problem } from '../shared/index.js';
import { patientGroups, type Scenario } from './scenario.js';

/** A problem with the field it stands at. */
export interface FieldProblem {
  readonly field: string;
  readonly problem: Problem;
}

interface Range {
  readonly low: number;
  readonly high: number;
  readonly unit: string;
  readonly whole?: true;
}

type NumberField = {
  [K in keyof Scenario]-?: NonNullable<Scenario[K]> extends number ? K : never;
}[keyof Scenario];

/** What each number of a scenario may be. The upper ends are what a department could mean, not what the machine could bear. */
export const scenarioRanges: Readonly<Record<NumberField, Range>> = {
  requestsPerDay: { low: 0, high: 500, unit: 'requests a day' },
  listAtStart: { low: 0, high: 5000, unit: 'requests', whole: true },
  cutShortAfterMin: { low: 0, high: 120, unit: 'min' },
  bufferMin: { low: 0, high: 60, unit: 'min' },
  overbooked: { low: 0, high: 10, unit: 'patients a scanner and day', whole: true },
  emergenciesPerDay: { low: 0, high: 100, unit: 'a day' },
  noShowShare: { low: 0, high: 0.9, unit: 'share' },
  lateShare: { low: 0, high: 1, unit: 'share' },
  lateMeanMin: { low: 0, high: 120, unit: 'min' },
  earlyMin: { low: 0, high: 120, unit: 'min' },
  technologists: { low: 1, high: 100, unit: 'exams at once', whole: true },
  followUpShare: { low: 0, high: 1, unit: 'share' },
  followUpAfterDays: { low: 1, high: 60, unit: 'working days', whole: true },
  cannulaShare: { low: 0, high: 1, unit: 'share' },
  cannulaMeanMin: { low: 0, high: 120, unit: 'min' },
  downShare: { low: 0, high: 1, unit: 'share' },
  downMeanMin: { low: 0, high: 1440, unit: 'min' },
  overtimeUpToMin: { low: 0, high: 480, unit: 'min' },
  months: { low: 1, high: 500, unit: 'months', whole: true },
  daysAMonth: { low: 1, high: 60, unit: 'working days', whole: true },
  seed: { low: 0, high: 2 ** 32 - 1, unit: 'seed', whole: true },
};

const longestTeam = 60;
/** Stretches in which one scanner is open, or has a break. */
const mostStretches = 12;

/** Most scanner-days one run may take: some minutes on a small machine. */
export const mostDays = 20_000;
const mostScanners = 12;

/** Everything that is wrong with a scenario, each with its field and the way out; empty when it can be run. */
export function checkScenario(
  scenario: Scenario,
  known: { readonly examIds: readonly string[] },
): readonly FieldProblem[] {
  return [
    ...nameProblems(scenario),
    ...scannerProblems(scenario),
    ...numberProblems(scenario),
    ...slotProblems(scenario, known.examIds),
    ...shareProblems(scenario, known.examIds),
    ...teamProblems(scenario),
  ];
}

const problem = (
  field: string,
  value: string,
  limit: string,
  wayOut: string,
  code = 'scenario-value',
): FieldProblem => ({
  field,
  problem: { code, thing: `scenario, field ${field}`, value, limit, wayOut },
});

function nameProblems({ name }: Scenario): FieldProblem[] {
  if (name.trim() === '')
    return [problem('name', 'empty', 'a name to tell scenarios apart', 'Give it a name.')];
  if (name.length > 80)
    return [problem('name', `${name.length} characters`, 'at most 80', 'Shorten the name.')];
  return [];
}

function scannerProblems({ scanners }: Scenario): FieldProblem[] {
  if (scanners.length === 0)
    return [problem('scanners', 'none', 'a department has a scanner', 'Give it at least one.')];
  const found: FieldProblem[] = [];
  if (scanners.length > mostScanners)
    found.push(
      problem(
        'scanners',
        `${scanners.length}`,
        `at most ${mostScanners}`,
        'Take some out, or simulate two departments.',
      ),
    );
  const ids = scanners.map((s) => s.id);
  for (const id of new Set(ids.filter((id, n) => ids.indexOf(id) !== n)))
    found.push(problem('scanners', id, 'each scanner once', 'Give the copy another id.'));
  for (const { id, hours, breaks } of scanners) {
    const field = `hours ${id}`;
    if (hours.length === 0)
      found.push(problem(field, 'none', 'open for some time', 'Give the hours it is open.'));
    if (Math.max(hours.length, breaks.length) > mostStretches)
      found.push(
        problem(
          field,
          `${Math.max(hours.length, breaks.length)} stretches`,
          `at most ${mostStretches} a day`,
          'Join some.',
        ),
      );
    for (const { fromMin, toMin } of [...hours, ...breaks]) {
      if (
        Number.isInteger(fromMin) &&
        Number.isInteger(toMin) &&
        fromMin >= 0 &&
        toMin <= 1440 &&
        fromMin < toMin
      )
        continue;
      found.push(
        problem(
          field,
          `${hoursWords(fromMin)} to ${hoursWords(toMin)}`,
          'from 00:00 to 24:00 of one day, the end after the start',
          'Correct the hours; a night shift is two stretches.',
        ),
      );
    }
    const sorted = [...hours].sort((a, b) => a.fromMin - b.fromMin);
    if (sorted.some((h, n) => n > 0 && h.fromMin < sorted[n - 1]!.toMin))
      found.push(problem(field, 'stretches that overlap', 'one after the other', 'Join them.'));
  }
  return found;
}

const hoursWords = (minute: number) =>
  Number.isFinite(minute)
    ? `${Math.floor(minute / 60)}:${String(Math.round(minute % 60)).padStart(2, '0')}`
    : 'no time';

function numberProblems(scenario: Scenario): FieldProblem[] {
  const found = (Object.keys(scenarioRanges) as NumberField[]).flatMap((field) => {
    const value = scenario[field];
    if (value === undefined) return [];
    const { low, high, unit, whole } = scenarioRanges[field];
    const fits =
      Number.isFinite(value) &&
      value >= low &&
      value <= high &&
      (!whole || Number.isInteger(value));
    if (fits) return [];
    const kind = whole ? 'a whole number' : 'a number';
    return [
      problem(field, `${value}`, `${kind} from ${low} to ${high} (${unit})`, 'Correct the number.'),
    ];
  });
  const days = scenario.months * scenario.daysAMonth;
  if (found.length === 0 && days > mostDays)
    found.push(
      problem(
        'months',
        `${days} days in all`,
        `at most ${mostDays} days a run`,
        'Fewer months tell nearly as much: limits shrink only with the square root of the days.',
        'scenario-days',
      ),
    );
  return found;
}

const slotFits = (minutes: number) =>
  Number.isInteger(minutes) && minutes >= 10 && minutes <= 90 && minutes % 5 === 0;
const slotLimit = '10 to 90 minutes in steps of five';

function slotProblems({ slots }: Scenario, examIds: readonly string[]): FieldProblem[] {
  const wrong = (field: string, minutes: number) =>
    slotFits(minutes)
      ? []
      : [problem(field, `${minutes} min`, slotLimit, 'Choose a length from the list.')];
  if (slots.kind === 'fixed') return wrong('slots', slots.minutes);
  if (slots.kind === 'tolerance') return wrong('slots', slots.mostMin);
  return [
    ...wrong('slots', slots.otherwise),
    ...Object.entries(slots.minutes).flatMap(([examId, minutes]) => [
      ...unknownExam('slots', examId, examIds),
      ...wrong(`slot ${examId}`, minutes),
    ]),
  ];
}

const unknownExam = (field: string, examId: string, examIds: readonly string[]) =>
  examIds.includes(examId)
    ? []
    : [
        problem(
          field,
          `"${examId}"`,
          `known exams: ${examIds.join(', ')}`,
          'Use one of the known exams.',
        ),
      ];

function shareProblems(
  { examShares, groupShares }: Scenario,
  examIds: readonly string[],
): FieldProblem[] {
  const shares = (field: string, list: Readonly<Record<string, number | undefined>>) => {
    const values = Object.values(list);
    const bad = values.find((v) => v === undefined || !Number.isFinite(v) || v < 0);
    if (bad !== undefined)
      return [problem(field, `${bad}`, 'shares of 0 or more', 'Correct the share.')];
    return values.some((v) => v! > 0)
      ? []
      : [problem(field, 'all 0', 'some share above 0', 'Give at least one a share.')];
  };
  return [
    ...(examShares === undefined
      ? []
      : [
          ...Object.keys(examShares).flatMap((id) => unknownExam('examShares', id, examIds)),
          ...shares('examShares', examShares),
        ]),
    ...(groupShares === undefined ? [] : shares('groupShares', groupShares)),
  ];
}

function teamProblems({ teams }: Scenario): FieldProblem[] {
  return teams.flatMap((team) => {
    const name = team.name.trim();
    if (name === '' || name.length > longestTeam)
      return [
        problem(
          'teams',
          name === '' ? 'no name' : `a name of ${name.length} characters`,
          `a name of at most ${longestTeam} characters`,
          'Name the team in a few words.',
        ),
      ];
    const unknown = team.groups.filter((g) => !patientGroups.includes(g));
    if (unknown.length > 0)
      return [
        problem('teams', unknown.join(', '), patientGroups.join(', '), 'Use one of the groups.'),
      ];
    return Number.isInteger(team.count) && team.count >= 1 && team.count <= 20
      ? []
      : [
          problem(
            'teams',
            `${name}: ${team.count}`,
            'a whole number from 1 to 20',
            'A team nobody has cannot be asked for: take it out or give it one.',
          ),
        ];
  });
}
