import { columnsOf, type BookingChange, type BookingState } from './booking-change.js';
import { claimAnew, holderOf } from './claims.js';
import type { Tx } from './in-transaction.js';
import { refused, stale, type PlacingOutcome, type Refused } from './outcomes.js';
import { setRequestStatus } from './request-status.js';
import { bookingFrom, type StoredBooking } from './stored.js';
import { assertPlace, type Place } from './ticks.js';

/** A place wanted for a request, with what is to be kept of its plan. */
export interface NewBooking extends Place {
  readonly requestId: string;
  /** The request's version the plan was made from; another one by now is stale. */
  readonly requestVersion?: number;
  /** JSON. */
  readonly plan?: unknown;
}

/** What a move may change; the rest stays. */
export type Move = Partial<Place> & { readonly plan?: unknown };

/** A booking moved or resized: how it stands after, and what the history calls it. */
export function movedTo(before: StoredBooking, to: Move): Omit<BookingChange, 'before'> | Refused {
  if (before.status !== 'booked' && before.status !== 'arrived') {
    return refused(`booking ${before.id} is ${before.status}`);
  }
  const after = moved(before, to);
  const resized = after.slotMin !== before.slotMin;
  const elsewhere =
    after.scannerId !== before.scannerId ||
    after.date !== before.date ||
    after.startMin !== before.startMin;
  return { after, action: resized && !elsewhere ? 'resized' : 'moved' };
}

/** A plan is kept over a move only while the scanner and the slot it was made for stay the same. */
function moved(before: StoredBooking, to: Move): BookingState {
  const { scannerId, date, startMin, slotMin, teams, plan } = before;
  const place = { scannerId, date, startMin, slotMin, teams, ...to };
  const fits = place.scannerId === scannerId && place.slotMin === slotMin;
  return { ...place, status: before.status, plan: to.plan ?? (fits ? plan : null) };
}

/** Gives a waiting request a place, inside a transaction that is already open. */
export async function placeBooking(tx: Tx, wanted: NewBooking): Promise<PlacingOutcome> {
  assertPlace(wanted);
  const { requestId, requestVersion, scannerId, date, startMin, slotMin, teams, plan } = wanted;
  const request = await tx.db
    .selectFrom('request')
    .select(['status', 'version'])
    .where('id', '=', requestId)
    .executeTakeFirst();
  if (request === undefined) return refused(`there is no request ${requestId}`);
  if (requestVersion !== undefined && requestVersion !== request.version) {
    return stale(`request ${requestId}`, requestVersion, request.version);
  }
  if (request.status !== 'waiting') {
    return { kind: 'stale', why: `request ${requestId} is ${request.status} by now` };
  }
  const holder = await holderOf(tx, wanted);
  if (holder !== undefined) return { kind: 'taken', by: holder };
  const earlier = await tx.db
    .selectFrom('booking')
    .select(({ fn }) => fn.countAll<number>().as('count'))
    .where('request_id', '=', requestId)
    .executeTakeFirstOrThrow();
  const state: BookingState = { scannerId, date, startMin, slotMin, teams, status: 'booked', plan };
  const row = await tx.db
    .insertInto('booking')
    .values({
      // The request's number and how many places it has had: no chance needed, and unique by itself.
      id: `${requestId}.${earlier.count + 1}`,
      request_id: requestId,
      ...columnsOf(state),
      version: 1,
    })
    .returningAll()
    .executeTakeFirstOrThrow();
  const booking = bookingFrom(row);
  await claimAnew(tx, booking.id, booking);
  const { plan: _, ...image } = booking;
  await tx.record({ what: 'booking', id: booking.id, action: 'placed', to: image });
  await setRequestStatus(tx, requestId, 'booked');
  return { kind: 'placed', booking };
}
