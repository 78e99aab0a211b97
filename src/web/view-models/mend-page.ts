import {
  clock,
  disturbanceWords,
  farWords,
  moveWords,
  peopleWords,
  placeWords,
  proofWords,
  proposalHeading,
  samePlace,
  scannerName,
  sentence,
  shiftWords,
  slotWords,
  type Booking,
  type Repair,
} from '../../day/index.js';
import type { StoredRequest } from '../../store/index.js';
import { acceptField, type AcceptField } from '../mend-changes.js';
import type { MendProposal } from '../mend-proposal.js';

/** Somebody in a proposal: who, then what, a sentence or two. */
export interface MendPerson {
  readonly requestId: string;
  readonly exam: string;
  readonly words: readonly string[];
}

export interface MendGroup {
  readonly heading: string;
  readonly people: readonly MendPerson[];
}

export interface MendView {
  readonly heading: string;
  readonly summary: string;
  readonly proof: string;
  /** A way out where somebody moves far; often empty. */
  readonly far: string;
  readonly groups: readonly MendGroup[];
  /** What accepting sends; empty when there is nothing to accept. */
  readonly fields: readonly AcceptField[];
  readonly accept: string;
}

/** The proposals of a mended day in words, each with what accepting it sends. */
export function mendViews(
  proposal: MendProposal,
  requests: ReadonlyMap<string, StoredRequest>,
  examName: (examId: string) => string,
  day: string,
): readonly MendView[] {
  const { outcome } = proposal;
  const person = (requestId: string, ...words: readonly string[]): MendPerson => ({
    requestId,
    exam: examName(requests.get(requestId)?.body.examId ?? ''),
    words,
  });
  return outcome.proposals.map((repair, n) => ({
    heading: proposalHeading(repair, n, outcome.proposals.length),
    summary: disturbanceWords(repair),
    proof: proofWords(repair),
    far: farWords(repair),
    groups: groupsOf(repair, proposal, day, person),
    fields: fieldsOf(repair, proposal, requests),
    accept: acceptWords(repair),
  }));
}

function groupsOf(
  repair: Repair,
  { problem: { department }, bookings }: MendProposal,
  day: string,
  person: (requestId: string, ...words: readonly string[]) => MendPerson,
): readonly MendGroup[] {
  const at = (b: Booking) => placeWords(b, department, day);
  const moves = repair.moves.flatMap(({ requestId, from, to, answers, because }) =>
    from === undefined
      ? []
      : [
          person(
            requestId,
            sentence(`${moveWords(from, to, department, day)}${slotWords(from, to)}`),
            `${sentence(answers)} Why: ${sentence(because)}`,
          ),
        ],
  );
  const emergency = repair.moves.flatMap(({ requestId, from, to, answers }) =>
    from === undefined
      ? [person(requestId, `At ${at(to)}, ${to.slotMin} minutes.`, sentence(answers))]
      : [],
  );
  const waits = repair.waitOnSite.map(({ requestId, from, to }) =>
    person(
      requestId,
      `On the way in or here already: begins at ${clock(to.startMin)} instead of ${clock(from.startMin)} on ${scannerName(to.scannerId, department)}, ${shiftWords(from, to)}.`,
    ),
  );
  const without = repair.withoutPlace.map(({ requestId, why }) =>
    person(
      requestId,
      sentence(why),
      bookings.has(requestId) ? 'Comes off the board, and the request waits again.' : '',
    ),
  );
  return [
    { heading: 'Where the emergency goes', people: emergency },
    { heading: 'Who moves', people: moves },
    { heading: 'Who is here and must wait', people: waits },
    {
      heading: 'Who must be spoken with',
      people: repair.stuck.map((s) =>
        person(s.requestId, sentence(s.why), 'The booking stays as it is until then.'),
      ),
    },
    { heading: 'Who is left without a place', people: without },
  ].filter((g) => g.people.length > 0);
}

/** Everything that accepting changes, with the versions that were seen. */
function fieldsOf(
  repair: Repair,
  { problem: { event }, bookings }: MendProposal,
  requests: ReadonlyMap<string, StoredRequest>,
): readonly AcceptField[] {
  const over = event.kind === 'overrun' ? bookings.get(event.requestId) : undefined;
  const moved = (name: 'move' | 'wait', requestId: string, to: Booking) =>
    [bookings.get(requestId)].flatMap((b) => (b === undefined ? [] : [acceptField(name, b, to)]));
  const placed = (requestId: string, to: Booking) =>
    [requests.get(requestId)].flatMap((r) =>
      r === undefined ? [] : [acceptField('place', r, to)],
    );
  return [
    ...repair.moves.flatMap((m) =>
      m.from === undefined ? placed(m.requestId, m.to) : moved('move', m.requestId, m.to),
    ),
    ...repair.waitOnSite.flatMap((w) => moved('wait', w.requestId, w.to)),
    ...repair.withoutPlace.flatMap(({ requestId }) =>
      [bookings.get(requestId)].flatMap((b) => (b === undefined ? [] : [acceptField('cancel', b)])),
    ),
    ...(over !== undefined && event.kind === 'overrun'
      ? [acceptField('longer', over, { ...over, slotMin: over.slotMin + event.minutes })]
      : []),
  ];
}

function acceptWords(repair: Repair): string {
  const placed = repair.moves.filter((m) => m.from === undefined).length;
  const resized = repair.moves.filter(
    (m) => m.from !== undefined && samePlace(m.from, m.to),
  ).length;
  const booked = repair.moves.length - placed - resized;
  const waits = repair.waitOnSite.length;
  const off = repair.withoutPlace.length;
  const parts = [
    ...(booked > 0 ? [`move ${peopleWords(booked)}`] : []),
    ...(resized > 0 ? [`change the slot of ${peopleWords(resized)}`] : []),
    ...(placed > 0 ? ['place the emergency'] : []),
    ...(waits > 0 ? [`let ${peopleWords(waits)} wait`] : []),
    ...(off > 0 ? [`take ${peopleWords(off)} off the board`] : []),
  ];
  return parts.length === 0 ? 'Accept: make the slot longer' : `Accept: ${parts.join(', ')}`;
}
