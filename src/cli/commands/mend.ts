import { Option, type Command } from 'commander';
import {
  bookingConflicts,
  mend,
  onTheWayIn,
  takenPlace,
  waitingRequest,
  type BookedVisit,
  type DayEvent,
  type MendProblem,
  type WaitingRequest,
} from '../../day/index.js';
import type { PlanningGround } from '../../planning/index.js';
import { ProblemError } from '../../shared/index.js';
import { openDepartment, openGround, openRequests } from '../ground.js';
import { openPlanningGround } from '../own-records.js';
import { readMendFlags, type MendAsked, type MendFlags } from '../mend-asked.js';
import { exitCodes, print, printJson, printProblems } from '../output.js';
import { mendText } from '../text/mend-text.js';
import { waitingRequests } from './fill.js';

/** `mend`: what could be done about something that happened to a day; books nothing. */
export function addMendCommand(program: Command): void {
  program
    .command('mend')
    .summary('propose who moves where after something happened')
    .description(
      'Takes the booked requests of a file and one thing that happened, and proposes\n' +
        'the least disturbing way on: fewest people without a place, then fewest moved,\n' +
        'then the smallest shifts. Nobody on the way in is moved. Books nothing.',
    )
    .argument('<file>', 'requests as .csv or .json')
    .option('--down <scanner>', 'this scanner is down, with --from and --to')
    .option('--staff-gone <scanner>', 'this scanner has no staff, with --from and --to')
    .option('--late <request>', 'this patient is late, with --minutes')
    .option('--overrun <request>', 'this exam runs over, with --minutes')
    .addOption(noShowOption())
    .option('--emergency <request>', 'this waiting request must be scanned today')
    .option('--minutes <n>', 'by how much, minutes', '20')
    .option('--day <date>', "the day (default: the patient's, or the department's first)")
    .option('--from <time>', 'start of the stretch that is lost, as 10:00')
    .option('--to <time>', 'its end')
    .option('--now <time>', "time of day now (default: --from, or the patient's start)")
    .option('--before <time>', 'who starts before it is on the way in (default: 60 min from now)')
    .option('--library <folder>', 'site library (default: the one that ships)')
    .option('--department <file>', 'department file (default: the demo department)')
    .option('--json', 'the proposals as JSON')
    .addHelpText(
      'after',
      `
Examples:
  mend data-demo/requests.csv --down mr2 --from 10:00 --to 14:00 --now 09:30
  mend data-demo/requests.csv --overrun R-103 --minutes 40
  mend data-demo/requests.csv --emergency R-159 --now 10:05`,
    )
    .action(async (file: string, flags: MendFlags) => {
      process.exitCode = mendFile(file, flags, await openPlanningGround(flags.library));
    });
}

/** Commander takes an option that begins with "no" for the denial of another. */
function noShowOption(): Option {
  const option = new Option('--no-show <request>', 'this patient did not come');
  option.negate = false;
  return option;
}

/** Mends the day in a file and prints the proposals; returns the exit code. */
export function mendFile(
  file: string,
  flags: MendFlags,
  ground: PlanningGround = openGround(flags.library).ground,
): number {
  const planned = openDepartment(flags.department);
  const read = openRequests(file);
  const asked = tried(() => readMendFlags(flags, read, planned, file));
  if (asked === undefined) return exitCodes.usage;
  const department = { ...planned, days: planned.days.filter((d) => d >= asked.day) };
  const booked = read.requests.filter(({ booking }) =>
    department.days.includes(booking?.date ?? ''),
  );
  const { event } = asked;
  const wanted =
    event.kind === 'no-show'
      ? read.requests.filter((r) => r.booking === undefined)
      : [
          // Those on the way in are not moved: what they could get elsewhere is nobody's question.
          ...booked.filter(
            ({ booking }) =>
              !onTheWayIn(asked, booking!) ||
              (event.kind === 'late' && event.requestId === booking!.requestId),
          ),
          ...(event.kind === 'emergency' ? [event.of] : []),
        ];
  const offered = new Map(waitingRequests(wanted, department, ground).map((r) => [r.id, r]));
  const noOffers = { offers: new Map(), cannot: new Map() };
  const problem: MendProblem = {
    department,
    event: dayEvent(event, offered),
    visits: booked.map(({ request, booking }): BookedVisit => ({
      ...takenPlace(booking!, request.examId, ground.library),
      request: offered.get(request.id) ?? waitingRequest(request, noOffers, ground.library),
    })),
    ...{ now: asked.now, movableFrom: asked.movableFrom },
    waiting: event.kind === 'no-show' ? [...offered.values()] : [],
  };
  const outcome = mend(problem);
  const problems = [...read.problems, ...bookingConflicts(problem.visits, planned)];
  if (flags.json === true) printJson({ ...outcome, problems });
  else print(mendText(outcome, problem));
  printProblems(problems);
  return problems.length === 0 ? exitCodes.ok : exitCodes.partly;
}

/** Flags that make no sense are a matter of the command line, and said before anything is worked out. */
function tried(readFlags: () => MendAsked): MendAsked | undefined {
  try {
    return readFlags();
  } catch (error) {
    if (!(error instanceof ProblemError) || error.problem.code !== 'mend-flags') throw error;
    printProblems([error.problem]);
    return undefined;
  }
}

/** An emergency is scanned on the day itself, whatever priority and due date its request was written with. */
function dayEvent(
  event: MendAsked['event'],
  offered: ReadonlyMap<string, WaitingRequest>,
): DayEvent {
  if (event.kind !== 'emergency') return event;
  const { dueDate: _, ...request } = offered.get(event.of.request.id)!;
  return { kind: 'emergency', request: { ...request, priority: 'stat' } };
}
