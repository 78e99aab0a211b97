import type { Command } from 'commander';
import { DateTime } from 'luxon';
import colour from 'picocolors';
import {
  bookingConflicts,
  fill,
  offersFor,
  repeatableStream,
  takenPlace,
  waitingRequest,
  type FillProblem,
  type FillProposal,
  type WaitingRequest,
} from '../../day/index.js';
import type { BookedRequest } from '../../interchange/index.js';
import { chooseCurve, type PlanningGround } from '../../planning/index.js';

import type { Department } from '../../day/index.js';
import { openDepartment, openGround, openRequests, unknownRequests } from '../ground.js';
import { openPlanningGround } from '../own-records.js';
import { exitCodes, print, printJson, printProblems, progressLine } from '../output.js';
import { fitted, wrapped } from '../text/layout.js';

interface FillFlags {
  readonly all?: true;
  readonly id?: string[];
  readonly iterations: string;
  readonly library?: string;
  readonly department?: string;
  readonly full?: true;
  readonly json?: true;
}

/** `fill`: a proposal for requests that wait; books nothing. */
export function addFillCommand(program: Command): void {
  program
    .command('fill')
    .summary('propose scanner, day and start for waiting requests')
    .description(
      'Places the requests of a file that have no start yet into the free time of the\n' +
        'department, around those that have one. Prints a proposal with reasons and the most\n' +
        'that any filling could reach; books nothing.',
    )
    .argument('<file>', 'requests as .csv or .json')
    .option('--all', 'place every request anew, as if none had a start')
    .option('--id <id...>', 'place only these; other bookings stand')
    .option('--iterations <n>', 'search budget; the same budget gives the same answer', '1500')
    .option('--full', 'every reason for every place')
    .option('--library <folder>', 'site library (default: the one that ships)')
    .option('--department <file>', 'department file (default: the demo department)')
    .option('--json', 'the proposal as JSON')
    .addHelpText(
      'after',
      `
Examples:
  fill data-demo/requests.csv
  fill data-demo/requests.csv --all --full`,
    )
    .action(async (file: string, flags: FillFlags) => {
      process.exitCode = fillFile(file, flags, await openPlanningGround(flags.library));
    });
}

/** Fills from a file and prints the proposal; returns the exit code. */
export function fillFile(
  file: string,
  flags: FillFlags,
  ground: PlanningGround = openGround(flags.library).ground,
): number {
  const iterations = Number(flags.iterations);
  if (!Number.isInteger(iterations) || iterations < 1 || iterations > 1_000_000) {
    printProblems([
      {
        code: 'fill-iterations',
        thing: 'option --iterations',
        value: `"${flags.iterations}"`,
        limit: 'a whole number from 1 to 1000000',
        wayOut: 'Leave it out for 1500.',
      },
    ]);
    return exitCodes.usage;
  }
  const department = openDepartment(flags.department);
  const read = openRequests(file);
  const wanted = (r: BookedRequest) =>
    flags.id === undefined
      ? flags.all === true || r.booking === undefined
      : flags.id.includes(r.request.id);
  const missing = unknownRequests(flags.id ?? [], read, file);
  const taken = read.requests
    .filter((r) => !wanted(r) && r.booking !== undefined)
    .map((r) => takenPlace(r.booking!, r.request.examId, ground.library));
  const problem: FillProblem = {
    department,
    taken,
    waiting: waitingRequests(read.requests.filter(wanted), department, ground),
  };
  const problems = [...read.problems, ...missing, ...bookingConflicts(taken, department)];
  const tell = progressLine('placing');
  const run = fill(problem, { iterations, random: repeatableStream(1) });
  let step = run.next();
  while (step.done !== true) {
    tell(step.value.iteration, step.value.of);
    step = run.next();
  }
  tell(iterations, iterations);
  const proposal = step.value;
  if (flags.json === true) printJson({ proposal, problems });
  else print(proposalText(proposal, problem, flags.full === true));
  printProblems(problems);
  if (problem.waiting.length > 0 && proposal.placements.length === 0) return exitCodes.nothing;
  return problems.length === 0 ? exitCodes.ok : exitCodes.partly;
}

/** Requests with what each scanner can offer them. */
export function waitingRequests(
  requests: readonly BookedRequest[],
  department: Department,
  ground: PlanningGround,
): readonly WaitingRequest[] {
  const tell = progressLine('working out what each slot gives');
  const waiting = requests.map(({ request }, n): WaitingRequest => {
    tell(n, requests.length);
    const offered = offersFor(request, department.scanners, ground, chooseCurve);
    return waitingRequest(request, offered, ground.library);
  });
  tell(requests.length, requests.length);
  return waiting;
}

/** The proposal for an 80-column terminal. */
export function proposalText(proposal: FillProposal, problem: FillProblem, full: boolean): string {
  const { placements, waiting, objective, bound, gap, provedBy } = proposal;
  const lines: string[] = [];
  let heading = '';
  for (const p of placements) {
    const scanner = problem.department.scanners.find((s) => s.id === p.scannerId);
    const when = DateTime.fromISO(p.date, { zone: 'utc' })
      .setLocale('en-GB')
      .plus({ minutes: p.startMin })
      .toFormat('ccc d LLL HH:mm');
    const over = `${when.slice(0, -6)}, ${scanner?.name ?? p.scannerId}`;
    if (over !== heading) lines.push('', colour.bold(over));
    heading = over;
    const priority = problem.waiting.find((r) => r.id === p.requestId)?.priority ?? '';
    lines.push(
      ` ${when.slice(-5)}  ${fitted(p.requestId, 12)} ${String(p.slotMin).padStart(3)} min  ${priority}`,
      ...(full ? p.why : p.why.slice(0, 1)).map((w) => wrapped(w, '        ')),
    );
  }
  if (waiting.length > 0) lines.push('', colour.bold('Without a place'));
  for (const w of waiting) {
    lines.push(` ${w.requestId}`, wrapped(w.why, '        '));
    for (const way of w.ways) lines.push(wrapped(way.sentence, `        or: `, '            '));
  }
  const reached = `${objective.diagnostic} of at most ${bound.diagnostic}`;
  lines.push(
    '',
    wrapped(
      `${placements.length} of ${problem.waiting.length} placed. Diagnostic answers, by weight, priority and due date: ${reached}${gap === 0 ? ' (no filling has more)' : ` (at most ${(100 * gap).toFixed(1)} % more is possible)`}. Coil changes, standing bookings included: ${objective.coilChanges}. Found by ${provedBy}.`,
      '',
    ),
    'This is a proposal: nothing is booked.',
  );
  return lines.join('\n').replace(/^\n/, '');
}
