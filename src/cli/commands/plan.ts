import type { Command } from 'commander';
import { linearSolver } from '../../planning/index.js';
import { openDepartment, openRequests, unknownRequests } from '../ground.js';
import { openPlanningGround } from '../own-records.js';
import { exitCodes, print, printJson, printProblems, progressLine } from '../output.js';
import { planRequests, whenWords, type PlannedList } from '../plan-requests.js';
import { planBrief, planText } from '../text/plan-text.js';

/** Wall clock for one choice; then the branch and bound answers, which has it ready. */
const choosingMs = 150;

interface PlanFlags {
  readonly id?: string[];
  readonly library?: string;
  readonly department?: string;
  readonly slot?: string;
  readonly full?: true;
  readonly json?: true;
}

/** `plan`: one request or a list of them. */
export function addPlanCommand(program: Command): void {
  program
    .command('plan')
    .summary('plan one request or a list (CSV or JSON)')
    .description(
      'Plans every request in a file: which sequences, in which order, what each clinical\n' +
        'question gets, and the chance that the exam ends inside its slot. Rows that cannot\n' +
        'be used are named with row, field and value; the others are planned.',
    )
    .argument('<file>', 'requests as .csv (opens in any spreadsheet) or .json')
    .option('--id <id...>', 'only these requests')
    .option('--full', 'everything about each plan, not only the short form')
    .option('--library <folder>', 'site library (default: the one that ships)')
    .option('--department <file>', 'department file (default: the demo department)')
    .option('--json', 'the plans as JSON')
    .addHelpText(
      'after',
      `
Examples:
  plan data-demo/requests.csv
  plan data-demo/requests.csv --id R-104 --full
  plan one-request.json --json`,
    )
    .action(async (file: string, flags: PlanFlags) => {
      process.exitCode = await planFile(file, flags);
    });
}

/** Plans a file and prints it; returns the exit code. */
export async function planFile(file: string, flags: PlanFlags): Promise<number> {
  const ground = await openPlanningGround(flags.library);
  const department = openDepartment(flags.department);
  const read = openRequests(file);
  const wanted =
    flags.id === undefined
      ? read.requests
      : read.requests.filter((r) => flags.id?.includes(r.request.id));
  const solver = linearSolver({ wallClockMs: choosingMs });
  let list: PlannedList;
  try {
    list = await planRequests(wanted, department, ground, solver, progressLine('planning'));
  } finally {
    await solver.close();
  }
  const missing = unknownRequests(flags.id ?? [], read, file);
  const problems = [...read.problems, ...missing, ...list.problems];
  if (flags.json === true) printJson({ plans: list.planned.map((p) => p.plan), problems });
  else {
    const full = flags.full === true || list.planned.length === 1;
    for (const { plan, booked } of list.planned) {
      print(
        `${full ? planText(plan, { when: whenWords(booked) }) : planBrief(plan, { when: whenWords(booked) })}\n`,
      );
    }
    printProblems(problems);
  }
  if (problems.length === 0) return exitCodes.ok;
  return list.planned.length > 0 ? exitCodes.partly : exitCodes.nothing;
}
