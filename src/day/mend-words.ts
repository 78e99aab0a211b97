import { clock } from './conflicts.js';
import { farShiftMin, type Repair } from './mend-problem.js';
import type { Booking, Department } from './scanners.js';

export const scannerName = (id: string, department: Department): string =>
  department.scanners.find((s) => s.id === id)?.name ?? id;

/** "10:40 on Scanner 2", with the day where it is another than the one looked at. */
export const placeWords = (place: Booking, department: Department, day: string): string =>
  `${place.date === day ? '' : `${place.date} `}${clock(place.startMin)} on ${scannerName(place.scannerId, department)}`;

/** From one place to another and by how much: the scanner once where it stays the same. */
export const moveWords = (
  from: Booking,
  to: Booking,
  department: Department,
  day: string,
): string =>
  samePlace(from, to)
    ? `keeps ${placeWords(to, department, day)}`
    : from.scannerId === to.scannerId && from.date === to.date
      ? `from ${clock(from.startMin)} to ${placeWords(to, department, day)}: ${shiftWords(from, to)}`
      : `from ${placeWords(from, department, day)}, to ${placeWords(to, department, day)}: ${shiftWords(from, to)}`;

/** Minutes as people say them: "50 minutes", "2 h 30 min". */
export const spanWords = (minutes: number): string =>
  minutes < 60
    ? `${minutes} minutes`
    : `${Math.floor(minutes / 60)} h${minutes % 60 === 0 ? '' : ` ${minutes % 60} min`}`;

/** Whether two places differ in the slot at most. */
export const samePlace = (a: Booking, b: Booking): boolean =>
  a.scannerId === b.scannerId && a.date === b.date && a.startMin === b.startMin;

/** By how much a start moves. */
export function shiftWords(from: Booking, to: Booking): string {
  if (from.date !== to.date) return to.date > from.date ? 'a later day' : 'an earlier day';
  const by = to.startMin - from.startMin;
  return by === 0 ? 'same time' : `${spanWords(Math.abs(by))} ${by > 0 ? 'later' : 'earlier'}`;
}

/** A change of the slot, if there is one. */
export const slotWords = (from: Booking, to: Booking): string =>
  from.slotMin === to.slotMin ? '' : `, slot of ${to.slotMin} minutes instead of ${from.slotMin}`;

export const peopleWords = (n: number): string => (n === 1 ? '1 person' : `${n} people`);

/** A sentence of its own: capital first, full stop last. */
export const sentence = (text: string): string =>
  `${text.slice(0, 1).toUpperCase()}${text.slice(1)}${/[.!?]$/.test(text) ? '' : '.'}`;

/** How much a proposal disturbs, in one sentence. */
export function disturbanceWords(repair: Repair): string {
  const { withoutPlace, waitOnSite, stuck } = repair;
  const changed = repair.moves.flatMap(({ from, to }) =>
    from === undefined ? [] : [{ from, to }],
  );
  const pairs = changed.filter(({ from, to }) => !samePlace(from, to));
  const resized = changed.length - pairs.length;
  const otherDay = pairs.filter(({ from, to }) => from.date !== to.date).length;
  const most = Math.max(
    0,
    ...pairs
      .filter(({ from, to }) => from.date === to.date)
      .map(({ from, to }) => Math.abs(to.startMin - from.startMin)),
  );
  const parts = [
    ...(pairs.length === 0
      ? ['nobody who is booked has to move']
      : [
          `${peopleWords(pairs.length)} ${pairs.length === 1 ? 'moves' : 'move'}` +
            (most > 0 ? `, by ${pairs.length === 1 ? '' : 'at most '}${spanWords(most)}` : '') +
            (otherDay > 0 ? `, ${otherDay} to another day` : ''),
        ]),
    ...(resized > 0 ? [`${peopleWords(resized)} with another slot in the same place`] : []),
    ...(waitOnSite.length > 0 ? [`${peopleWords(waitOnSite.length)} on site must wait`] : []),
    ...(stuck.length > 0 ? [`${peopleWords(stuck.length)} must be spoken with`] : []),
    ...(withoutPlace.length > 0
      ? [`${peopleWords(withoutPlace.length)} left without a place`]
      : []),
  ];
  return sentence(parts.join('; '));
}

/** Fewest people is not always what the one who moves far would choose; the way out is by hand. */
export function farWords(repair: Repair): string {
  const far = repair.moves.filter(
    ({ from, to }) =>
      from !== undefined &&
      (from.date !== to.date || Math.abs(from.startMin - to.startMin) > farShiftMin),
  );
  if (far.length === 0) return '';
  const ids = far.map((m) => m.requestId).join(', ');
  return `As few people as possible are moved, even where one of them then moves far (${ids}). If that is too far, look at a further proposal where there is one, or move somebody else on the day board first and ask again.`;
}

/**
 * Which answers differ between two offers, each with the words that stand beside its grade. Both texts are those of
 * `Offer.words`; where they do not speak of the same questions, both are given whole.
 */
export function changedAnswers(was: string, is: string): string {
  const before = was.split('; ');
  const after = is.split('; ');
  const nameIn = (text: string) => text.slice(0, text.indexOf(': '));
  const gradeIn = (text: string) => text.slice(text.indexOf(': ') + 2);
  const comparable =
    before.length === after.length && before.every((text, n) => nameIn(text) === nameIn(after[n]!));
  if (!comparable) return `${is} (was: ${was})`;
  return after
    .flatMap((text, n) => (text === before[n] ? [] : [`${text} (was: ${gradeIn(before[n]!)})`]))
    .join('; ');
}

/** What is known of how good a proposal is. */
export const proofWords = (repair: Repair): string =>
  repair.fewest
    ? 'Proved: no other way of this kind leaves fewer people without a place or moves fewer.'
    : 'Not proved: the search stopped at its limit, and a way that moves fewer people may exist.';

const ordinals = ['First', 'Second', 'Third'];

/** What a proposal is called among the others. */
export function proposalHeading(repair: Repair, n: number, of: number): string {
  if (of === 1) return 'Proposal';
  const which = repair.shorterSlots
    ? 'shorter slots, fewer people disturbed, some answers lost'
    : repair.shiftLimitMin !== undefined
      ? `nobody moves by more than ${repair.shiftLimitMin} minutes, more people move`
      : 'nobody loses an answer, fewest people move';
  return `${ordinals[n] ?? ''} proposal: ${which}`;
}
