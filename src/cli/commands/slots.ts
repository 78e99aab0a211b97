import { join } from 'node:path';
import { InvalidArgumentError, type Command } from 'commander';
import { quantileS } from '../../planning/index.js';
import {
  adviceTable,
  fillAndLive,
  groupNames,
  PlanBook,
  type AdviceRow,
  type FilledDays,
} from '../../throughput/index.js';
import { demoFolder } from '../files.js';
import { openDepartment, openGround, openRequests } from '../ground.js';
import { exitCodes, print, printJson, printProblems, progressLine } from '../output.js';
import { fitted, wrapped } from '../text/layout.js';

interface SlotFlags {
  readonly library?: string;
  readonly department?: string;
  readonly json?: true;
}

const between = (low: number, high: number) => (text: string) => {
  const value = Number(text);
  if (Number.isFinite(value) && value >= low && value <= high) return value;
  throw new InvalidArgumentError(`"${text}" is not a number from ${low} to ${high}.`);
};

/** `slots`: how long a slot should be, and what slot rules do to the same days. */
export function addSlotsCommand(program: Command): void {
  const slots = program
    .command('slots')
    .summary('how long slots should be, and what slot rules do to the same days');
  const common = (command: Command) =>
    command
      .argument('[file]', 'requests as .csv or .json', join(demoFolder, 'requests.csv'))
      .option('--library <folder>', 'site library (default: the one that ships)')
      .option('--department <file>', 'department file (default: the demo department)')
      .option('--json', 'as JSON');

  common(slots.command('advice'))
    .summary('slot per exam and patient group, for a chance and by cost')
    .option('--chance <percent>', 'wished chance to end in time', between(50, 99), 90)
    .option('--late <cost>', 'cost of a minute late', between(0.01, 1000), 3)
    .option('--idle <cost>', 'cost of a minute idle', between(0.01, 1000), 1)
    .option('--quick-looks', 'quick looks may be planned (not diagnostic)')
    .action((file: string, flags) => {
      process.exitCode = advice(file, flags as AdviceFlags);
    });

  common(slots.command('compare'))
    .summary('the same requests in slots by tolerance, fixed 30 and fixed 45 minutes')
    .description(
      'Fills the same requests into the same days under three slot rules and lives each filled\n' +
        'plan through many times, with every patient as lucky as under the other rules.',
    )
    .option('--days <n>', 'only the first days of the department', between(1, 31))
    .option('--lives <n>', 'times each filled plan is lived through', between(2, 10_000), 400)
    .action((file: string, flags) => {
      process.exitCode = compare(file, flags as CompareFlags);
    });
}

interface AdviceFlags extends SlotFlags {
  readonly chance: number;
  readonly late: number;
  readonly idle: number;
  readonly quickLooks?: true;
}

function advice(file: string, flags: AdviceFlags): number {
  const { ground } = openGround(flags.library);
  const department = openDepartment(flags.department);
  const read = openRequests(file);
  const asked = {
    chance: flags.chance / 100,
    lateCost: flags.late,
    idleCost: flags.idle,
    quickLooks: flags.quickLooks === true,
  };
  const requests = read.requests.map((r) => r.request);
  const run = adviceTable(requests, department.scanners, ground, new PlanBook(ground), asked);
  const tell = progressLine('planning');
  let step = run.next();
  while (step.done !== true) {
    tell(step.value.done, step.value.of);
    step = run.next();
  }
  tell(1, 1);
  if (flags.json === true)
    printJson(step.value.map(({ tableTime, ...row }) => ({ ...row, ...tenths({ tableTime }) })));
  else print(adviceText(step.value, flags.chance));
  printProblems(read.problems);
  return read.problems.length > 0 ? exitCodes.partly : exitCodes.ok;
}

const tenths = ({ tableTime }: Pick<AdviceRow, 'tableTime'>) => ({
  tenthMin: quantileS(tableTime, 0.1) / 60,
  medianMin: quantileS(tableTime, 0.5) / 60,
  ninetiethMin: quantileS(tableTime, 0.9) / 60,
});

function adviceText(rows: readonly AdviceRow[], chance: number): string {
  const head = `${fitted('Exam', 24)} ${fitted('Patients', 24)} 1/10 half 9/10  ${chance} %  cheapest`;
  return [
    head,
    ...rows.map((row) => {
      const { tenthMin, medianMin, ninetiethMin } = tenths(row);
      const times = [tenthMin, medianMin, ninetiethMin].map((m) =>
        String(Math.round(m)).padStart(4),
      );
      const { forChanceMin, cheapestMin } = row.advice;
      return `${fitted(row.exam, 24)} ${fitted(groupNames[row.group], 24)} ${times.join(' ')}  ${String(forChanceMin).padStart(4)}  ${String(cheapestMin).padStart(8)}`;
    }),
    '',
    wrapped(
      'Minutes: within which 1 of 10, half and 9 of 10 exams end; the slot for the wished chance; the slot where expected late and idle minutes cost least.',
      '',
    ),
  ].join('\n');
}

interface CompareFlags extends SlotFlags {
  readonly days?: number;
  readonly lives: number;
}

const rules = [
  { kind: 'tolerance', mostMin: 60 },
  { kind: 'fixed', minutes: 30 },
  { kind: 'fixed', minutes: 45 },
] as const;

function compare(file: string, flags: CompareFlags): number {
  const { ground } = openGround(flags.library);
  const whole = openDepartment(flags.department);
  const department = { ...whole, days: whole.days.slice(0, flags.days) };
  const read = openRequests(file);
  const book = new PlanBook(ground);
  const tell = progressLine('slot rules');
  const outcomes = rules.map((rule, n) => {
    tell(n, rules.length);
    return fillAndLive(rule, {
      requests: read.requests.map((r) => r.request),
      ...{ department, ground, book, seed: 1, iterations: 1500 },
      repeats: Math.round(flags.lives),
    });
  });
  tell(1, 1);
  if (flags.json === true) printJson(outcomes);
  else print(compareText(outcomes, department.days.length));
  printProblems(read.problems);
  return read.problems.length > 0 ? exitCodes.partly : exitCodes.ok;
}

function compareText(outcomes: readonly FilledDays[], days: number): string {
  const name = ({ rule }: FilledDays) =>
    rule.kind === 'fixed' ? `fixed ${rule.minutes} min` : 'by tolerance';
  const line = (what: string, of: (o: FilledDays) => string) =>
    `${fitted(what, 38)} ${outcomes.map((o) => of(o).padStart(13)).join(' ')}`;
  const mean = (of: (o: FilledDays) => { readonly mean: number }) => (o: FilledDays) =>
    of(o).mean.toFixed(1);
  return [
    line(`${outcomes[0]?.requests ?? 0} requests, ${days} day(s)`, name),
    line('Patients placed', (o) => String(o.placed)),
    line(
      'Questions answered diagnostically',
      mean((o) => o.diagnostic),
    ),
    line(
      'Exams longer than their slot',
      mean((o) => o.overruns),
    ),
    line(
      'Overtime, min',
      mean((o) => o.overtimeMin),
    ),
    line(
      'Longest wait of a day, min',
      mean((o) => o.longestWaitMin),
    ),
  ].join('\n');
}
