import { availableParallelism } from 'node:os';
import { join } from 'node:path';
import { InvalidArgumentError, type Command } from 'commander';
import { readScenarios } from '../../interchange/index.js';
import { sayProblem } from '../../shared/index.js';
import {
  checkScenario,
  firstScenarios,
  usualScenario,
  type Scenario,
} from '../../throughput/index.js';
import { runScenarios } from '../../throughput/pool/run-scenarios.js';
import { demoFolder, readText } from '../files.js';
import { openDepartment } from '../ground.js';
import { openPlanningGround } from '../own-records.js';
import { exitCodes, print, printJson, printProblems, progressLine } from '../output.js';
import { monthCsv } from '../text/month-csv.js';
import { monthText } from '../text/month-text.js';
import { usableRequests } from '../usable-requests.js';

interface MonthFlags {
  readonly requests?: string;
  readonly months?: number;
  readonly seed?: number;
  readonly threads?: number;
  readonly library?: string;
  readonly department?: string;
  readonly json?: true;
  readonly csv?: true;
}

const whole = (text: string): number => {
  const value = Number(text);
  if (Number.isInteger(value) && value >= 0) return value;
  throw new InvalidArgumentError(`"${text}" is not a whole number.`);
};

/** `month`: simulates the department under several policies and says what each changes. */
export function addMonthCommand(program: Command): void {
  program
    .command('month')
    .summary('simulate the department and compare slot rules, fallbacks, scanners')
    .description(
      'Simulates months of working days for each scenario of a file, on the same patients, and\n' +
        'compares them with the first. Without a file: fixed 30-minute slots against slots by\n' +
        'tolerance, without and with quick looks. Ctrl+C stops and prints what is done.',
    )
    .argument(
      '[file]',
      'scenarios as .yaml or .json; only what differs from the department as it is',
    )
    .option(
      '--requests <file>',
      'requests on record: the mix of exams and patients (default: the demo)',
    )
    .option('--months <n>', 'months simulated, for all scenarios', whole)
    .option('--seed <n>', 'the same seed gives the same patients', whole)
    .option('--threads <n>', 'threads; the result is the same on any number', whole)
    .option('--library <folder>', 'site library (default: the one that ships)')
    .option('--department <file>', 'department file (default: the demo department)')
    .option('--json', 'the comparison as JSON')
    .option('--csv', 'one row a scenario and measure')
    .addHelpText('after', '\nExamples:\n  month data-demo/scenarios.yaml\n  month --months 5 --csv')
    .action(async (file: string | undefined, flags: MonthFlags) => {
      process.exitCode = await month(file, flags);
    });
}

async function month(file: string | undefined, flags: MonthFlags): Promise<number> {
  const ground = await openPlanningGround(flags.library);
  const department = openDepartment(flags.department);
  const { requests, problems } = usableRequests(
    flags.requests ?? join(demoFolder, 'requests.csv'),
    ground,
  );
  printProblems(problems);
  if (requests.length === 0) return exitCodes.nothing;
  const { scenario: usual } = usualScenario(department, requests);
  const examIds = [...ground.library.exams.keys()];
  const asked =
    file === undefined
      ? ({ kind: 'ok', value: firstScenarios(usual) } as const)
      : readScenarios({ path: file, text: readText(file) }, usual, { examIds });
  if (asked.kind === 'refused') {
    printProblems(asked.problems);
    return exitCodes.nothing;
  }
  const scenarios = asked.value.map((s): Scenario => ({
    ...s,
    months: flags.months ?? s.months,
    seed: flags.seed ?? s.seed,
  }));
  const wrong = scenarios.flatMap((s) => checkScenario(s, { examIds }).map((p) => p.problem));
  if (wrong.length > 0) {
    // A number given for all is wrong in all alike: told once.
    const once = new Map(wrong.map((problem) => [sayProblem(problem), problem]));
    printProblems([...once.values()]);
    return exitCodes.usage;
  }
  const stop = new AbortController();
  process.once('SIGINT', () => stop.abort());
  const comparison = await runScenarios(scenarios, requests, ground, {
    threads: flags.threads ?? Math.max(1, availableParallelism()),
    signal: stop.signal,
    onPlanned: progressLine('planning'),
    onMonth: progressLine('simulating months'),
  });
  if (comparison.scenarios.some((s) => s.months.length === 0)) {
    process.stderr.write('Stopped before a month was done: nothing to compare.\n');
    return exitCodes.nothing;
  }
  if (flags.json === true) printJson(comparison);
  else print(flags.csv === true ? monthCsv(comparison) : monthText(comparison));
  return comparison.stopped || problems.length > 0 ? exitCodes.partly : exitCodes.ok;
}
