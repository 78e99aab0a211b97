import { join } from 'node:path';
import { InvalidArgumentError, type Command } from 'commander';
import { adviceTable, fillAndLive, PlanBook } from '../../throughput/index.js';
import { demoFolder } from '../files.js';
import { openDepartment, openGround } from '../ground.js';
import { exitCodes, print, printJson, printProblems, progressLine } from '../output.js';
import { adviceCsv, adviceText, tenths } from '../text/slot-advice-text.js';
import { comparedCsv, comparedText } from '../text/slots-compared-text.js';
import { usableRequests } from '../usable-requests.js';

interface SlotFlags {
  readonly library?: string;
  readonly department?: string;
  readonly json?: true;
  readonly csv?: true;
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
      .option('--json', 'as JSON')
      .option('--csv', 'as CSV, with a header');

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
  const { requests, problems } = usableRequests(file, ground);
  printProblems(problems);
  if (requests.length === 0) return exitCodes.nothing;
  const asked = {
    chance: flags.chance / 100,
    lateCost: flags.late,
    idleCost: flags.idle,
    quickLooks: flags.quickLooks === true,
  };
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
  else print(flags.csv === true ? adviceCsv(step.value) : adviceText(step.value, flags.chance));
  return problems.length > 0 ? exitCodes.partly : exitCodes.ok;
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
  const { requests, problems } = usableRequests(file, ground);
  printProblems(problems);
  if (requests.length === 0) return exitCodes.nothing;
  const book = new PlanBook(ground);
  const tell = progressLine('slot rules');
  const outcomes = rules.map((rule, n) => {
    tell(n, rules.length);
    return fillAndLive(rule, {
      ...{ requests, department, ground, book, seed: 1, iterations: 1500 },
      repeats: Math.round(flags.lives),
    });
  });
  tell(1, 1);
  if (flags.json === true) printJson(outcomes);
  else
    print(
      flags.csv === true
        ? comparedCsv(outcomes)
        : comparedText(outcomes, department.days.length, Math.round(flags.lives)),
    );
  return problems.length > 0 ? exitCodes.partly : exitCodes.ok;
}
