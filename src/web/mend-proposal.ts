import {
  mend,
  onTheWayIn,
  waitingRequest,
  type BookedVisit,
  type DayEvent,
  type MendOutcome,
  type MendProblem,
} from '../day/index.js';
import { ProblemError } from '../shared/index.js';
import type { StoredBooking, StoredRequest } from '../store/index.js';
import { gone } from './board-fields.js';
import type { PageDeps } from './deps.js';
import type { AskedEvent, MendAsked } from './mend-asked.js';
import { takenPlaces, withOffers } from './waiting-requests.js';

/** A proposal with what it was made from. */
export interface MendProposal {
  readonly outcome: MendOutcome;
  readonly problem: MendProblem;
  /** By request. */
  readonly bookings: ReadonlyMap<string, StoredBooking>;
}

/**
 * What could be done about an event, around everybody who is booked on the days asked for. Nothing is written.
 * @throws ProblemError when the patient or the request cannot be what the event says
 */
export async function proposeMend(
  deps: PageDeps,
  asked: MendAsked & { readonly event: AskedEvent },
  requests: ReadonlyMap<string, StoredRequest>,
  subject: StoredBooking | undefined,
): Promise<MendProposal> {
  const { department, store, ground } = deps;
  const { days, movableFrom, now } = asked;
  const listed = await store.bookings.listBetween(days[0]!, days[days.length - 1]!);
  const standing = listed.filter(
    (b) => days.includes(b.date) && department.scanners.some((s) => s.id === b.scannerId),
  );
  // One who did not come holds no place any more, but is what the event is about.
  const bookings =
    subject === undefined || standing.some((b) => b.id === subject.id)
      ? standing
      : [...standing, subject];
  const there = await alreadyThere(deps, bookings, movableFrom.date);
  refuseSubject(asked.event, subject, there);
  const onTheWay = new Set(
    bookings.filter((b) => there.has(b.id)).map(({ requestId }) => requestId),
  );

  const waiting = [...requests.values()].filter((r) => r.status === 'waiting');
  const stays = (b: StoredBooking) =>
    b !== subject && onTheWayIn({ movableFrom, onTheWay }, b) && asked.event.kind !== 'no-show';
  const wanted =
    asked.event.kind === 'no-show'
      ? waiting
      : bookings.filter((b) => !stays(b)).flatMap((b) => requests.get(b.requestId) ?? []);
  const offered = new Map((await withOffers(deps, wanted)).map((r) => [r.id, r]));
  const noOffers = { offers: new Map(), cannot: new Map() };
  const taken = takenPlaces(deps, bookings, requests);
  const visits = bookings.flatMap((b, n): BookedVisit[] => {
    const stored = requests.get(b.requestId);
    if (stored === undefined) return [];
    const request =
      offered.get(b.requestId) ?? waitingRequest(stored.body, noOffers, ground.library);
    // The heart knows one team a visit; the database watches over all of them.
    const team = b.teams[0] === undefined ? {} : { team: b.teams[0] };
    return [{ ...taken[n]!, ...team, request: { ...request, ...team } }];
  });
  const problem: MendProblem = {
    department: { ...department, days },
    ...{ visits, now, movableFrom, onTheWay },
    event: await eventOf(deps, asked.event, requests),
    waiting: [...offered.values()].filter((r) => requests.get(r.id)?.status === 'waiting'),
  };
  return {
    outcome: withoutThoseDone(mend(problem), bookings),
    problem,
    bookings: new Map(bookings.map((b) => [b.requestId, b])),
  };
}

/** Works out beforehand what the booked people could get elsewhere: seconds that nobody then waits for. */
export async function lookAhead(
  deps: PageDeps,
  days: readonly string[],
  requests: ReadonlyMap<string, StoredRequest>,
): Promise<void> {
  const booked = await deps.store.bookings.listBetween(days[0]!, days[days.length - 1]!);
  await withOffers(
    deps,
    booked.flatMap((b) => requests.get(b.requestId) ?? []),
  );
}

/** Bookings whose patient has come: arrived, at the scanner by its taps, or done. */
async function alreadyThere(
  { store }: PageDeps,
  bookings: readonly StoredBooking[],
  today: string,
): Promise<ReadonlySet<string>> {
  const there = new Set<string>();
  for (const b of bookings) {
    const has =
      b.status === 'arrived' ||
      b.status === 'fulfilled' ||
      (b.date <= today && (await store.consoleLog.list(b.id)).length > 0);
    if (has) there.add(b.id);
  }
  return there;
}

/** An exam that is done keeps its place on the board, but nobody need be spoken with or wait. */
function withoutThoseDone(outcome: MendOutcome, bookings: readonly StoredBooking[]): MendOutcome {
  const done = new Set(
    bookings.filter((b) => b.status === 'fulfilled').map(({ requestId }) => requestId),
  );
  const left = <T extends { readonly requestId: string }>(people: readonly T[]) =>
    people.filter((p) => !done.has(p.requestId));
  return {
    ...outcome,
    proposals: outcome.proposals.map((p) => ({
      ...p,
      stuck: left(p.stuck),
      waitOnSite: left(p.waitOnSite),
    })),
  };
}

function refuseSubject(
  event: AskedEvent,
  subject: StoredBooking | undefined,
  there: ReadonlySet<string>,
) {
  if (subject === undefined) return;
  const refuse = (value: string, limit: string, wayOut: string): never => {
    throw new ProblemError({
      code: 'mend-subject',
      thing: subject.requestId,
      value,
      limit,
      wayOut,
    });
  };
  const { status } = subject;
  if (status === 'cancelled' || status === 'fulfilled')
    refuse(
      status === 'cancelled' ? 'is off the board' : 'is done',
      'this can befall a booked exam only',
      'Choose another booking.',
    );
  if (status === 'noshow' && event.kind !== 'no-show')
    refuse('did not come', 'it has no place any more', 'Choose another booking.');
  if ((event.kind === 'late' || event.kind === 'no-show') && there.has(subject.id))
    refuse(
      'is here already',
      'marked as arrived, or tapped in at the scanner',
      'Choose another booking, or say that the exam runs over.',
    );
}

/** An emergency is scanned on the day itself, whatever priority and due date its request was written with. */
async function eventOf(
  deps: PageDeps,
  event: AskedEvent,
  requests: ReadonlyMap<string, StoredRequest>,
): Promise<DayEvent> {
  if (event.kind !== 'emergency') return event;
  const stored = requests.get(event.requestId);
  if (stored?.status !== 'waiting') throw gone('waiting request', event.requestId);
  const [request] = await withOffers(deps, [stored]);
  const { dueDate: _, ...rest } = request!;
  return { kind: 'emergency', request: { ...rest, priority: 'stat' } };
}
