import { DateTime } from 'luxon';
import colour from 'picocolors';
import {
  clock,
  disturbanceWords,
  farWords,
  moveWords,
  placeWords,
  proofWords,
  proposalHeading,
  scannerName,
  sentence,
  shiftWords,
  slotWords,
  type MendOutcome,
  type MendProblem,
  type Repair,
} from '../../day/index.js';
import { wrapped } from './layout.js';

/** The proposals for an 80-column terminal. */
export function mendText(outcome: MendOutcome, problem: MendProblem): string {
  const { now, movableFrom } = problem;
  const day = DateTime.fromISO(now.date, { zone: 'utc' }).setLocale('en-GB').toFormat('ccc d LLL');
  const lines = [
    problem.event.kind === 'no-show'
      ? `${day}, now ${clock(now.minute)}. Nobody else can be here before ${clock(movableFrom.minute)}.`
      : wrapped(
          `${day}, now ${clock(now.minute)}. Who starts before ${clock(movableFrom.minute)} is on the way in and is not moved.`,
          '',
        ),
  ];
  if (outcome.freed === undefined)
    outcome.proposals.forEach((repair, n) =>
      lines.push('', ...proposalLines(repair, n, outcome.proposals.length, problem)),
    );
  else lines.push('', ...freedLines(outcome.freed, problem));
  lines.push('', 'This is a proposal: nothing is booked and nobody is moved.');
  return lines.join('\n');
}

function proposalLines(repair: Repair, n: number, of: number, problem: MendProblem): string[] {
  const { department, now } = problem;
  const at = (place: Parameters<typeof placeWords>[0]) => placeWords(place, department, now.date);
  const heading = proposalHeading(repair, n, of);
  const person = (id: string, ...words: string[]) => [
    ` ${colour.bold(id)}`,
    ...words.map((w) => wrapped(w, '        ')),
  ];
  const group = (title: string, people: string[][]) =>
    people.length === 0 ? [] : ['', title, ...people.flat()];
  return [
    colour.bold(heading),
    wrapped(disturbanceWords(repair), ''),
    wrapped(proofWords(repair), ''),
    ...(farWords(repair) === '' ? [] : [wrapped(farWords(repair), '')]),
    ...group(
      'Where the emergency goes',
      repair.moves.flatMap(({ requestId, from, to, answers }) =>
        from === undefined
          ? [person(requestId, `At ${at(to)}, ${to.slotMin} minutes.`, sentence(answers))]
          : [],
      ),
    ),
    ...group(
      'Who moves',
      repair.moves.flatMap(({ requestId, from, to, answers, because }) =>
        from === undefined
          ? []
          : [
              person(
                requestId,
                sentence(`${moveWords(from, to, department, now.date)}${slotWords(from, to)}`),
                `${sentence(answers)} Why: ${sentence(because)}`,
              ),
            ],
      ),
    ),
    ...group(
      'Who is here and must wait',
      repair.waitOnSite.map(({ requestId, from, to }) =>
        person(
          requestId,
          `Begins at ${clock(to.startMin)} instead of ${clock(from.startMin)} on ${scannerName(to.scannerId, department)}, ${shiftWords(from, to)}.`,
        ),
      ),
    ),
    ...group(
      'Who must be spoken with',
      repair.stuck.map((s) => person(s.requestId, sentence(s.why))),
    ),
    ...group(
      'Who is left without a place',
      repair.withoutPlace.map((w) => person(w.requestId, sentence(w.why))),
    ),
  ];
}

function freedLines(
  { place, couldCome }: NonNullable<MendOutcome['freed']>,
  { department }: MendProblem,
): string[] {
  return [
    wrapped(
      `Nobody has to move. Free now: ${clock(place.startMin)} to ${clock(place.startMin + place.slotMin)} on ${scannerName(place.scannerId, department)}.`,
      '',
    ),
    wrapped(
      couldCome.length === 0
        ? 'Nobody of those waiting could come in time and fits into what is left of it.'
        : `Of those waiting could come, most urgent first: ${couldCome.join(', ')}.`,
      '',
    ),
  ];
}
