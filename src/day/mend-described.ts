import { clock } from './conflicts.js';
import { before, startOf } from './mend-moment.js';
import { bare } from './mend-no-show.js';
import type { MendProblem, Move, Repair } from './mend-problem.js';
import { offerAt, type Mover, type Rearranged, type RepairRules } from './mend-search.js';
import { changedAnswers, samePlace, scannerName } from './mend-words.js';
import type { Booking } from './scanners.js';

/** A rearrangement as a repair: who moves, by how much, what each gains or loses, and why. */
export function described(
  problem: MendProblem,
  movers: readonly Mover[],
  { replaced, dropped, fewest }: Rearranged,
  rest: Pick<Repair, 'stuck' | 'waitOnSite'> & RepairRules,
): Repair {
  const moves = replaced.map(({ mover: m, to, shiftMin, pushedBy }): Move => {
    const { request, home } = movers[m]!;
    const was = home === undefined ? undefined : offerAt(request, home);
    const is = offerAt(request, to);
    const diagnosticChange = (is?.diagnostic ?? 0) - (was?.diagnostic ?? 0);
    const same =
      was?.diagnostic === is?.diagnostic &&
      was?.targeted === is?.targeted &&
      was?.screening === is?.screening;
    return {
      requestId: request.id,
      ...(home === undefined ? {} : { from: bare(home) }),
      to,
      shiftMin,
      diagnosticChange,
      answers:
        is === undefined
          ? 'same slot on the same scanner'
          : home === undefined
            ? `gets: ${is.words}`
            : same
              ? 'same answers'
              : `${diagnosticChange < 0 ? 'loses' : diagnosticChange > 0 ? 'gains' : 'changes'}: ${was === undefined ? is.words : changedAnswers(was.words, is.words)}`,
      because:
        pushedBy === undefined
          ? causeWords(problem)
          : `its place is needed for ${movers[pushedBy]!.request.id}`,
    };
  });
  const booked = moves.filter((m) => m.from !== undefined && !samePlace(m.from, m.to));
  return {
    ...rest,
    moves: moves.filter((m) => m.from === undefined || !sameBooking(m.from, m.to)).sort(byTime),
    withoutPlace: dropped.map((m) => ({
      requestId: movers[m]!.request.id,
      why: `no place on the planned days that suits the patient, the scanner and those on their way in (${causeWords(problem)})`,
    })),
    peopleMoved: booked.length + dropped.filter((m) => movers[m]!.home !== undefined).length,
    shiftMin: moves.reduce((sum, m) => sum + m.shiftMin, 0),
    fewest,
  };
}

function causeWords({ event, department }: MendProblem): string {
  switch (event.kind) {
    case 'scanner down':
    case 'staff gone':
      return `${scannerName(event.scannerId, department)} ${event.kind === 'scanner down' ? 'is down' : 'has no staff'} ${clock(event.fromMin)} to ${clock(event.toMin)}`;
    case 'team gone':
      return `${event.team} is away ${clock(event.fromMin)} to ${clock(event.toMin)}`;
    case 'late':
      return `${event.requestId} is ${event.minutes} min late`;
    case 'overrun':
      return `${event.requestId} runs over by ${event.minutes} min`;
    case 'emergency':
      return `${event.request.id} is ${event.request.priority}`;
    case 'no-show':
      return `${event.requestId} did not come`;
  }
}

/** As a desk reads them: an emergency first, then by the time people were booked for. */
const byTime = (a: Move, b: Move): number => {
  if (a.from === undefined || b.from === undefined) return a.from === undefined ? -1 : 1;
  return before(startOf(a.from), startOf(b.from)) ? -1 : 1;
};
const sameBooking = (a: Booking, b: Booking) => samePlace(a, b) && a.slotMin === b.slotMin;
