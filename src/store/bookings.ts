import {
  changeBooking,
  columnsOf,
  type BookingChange,
  type BookingState,
} from './booking-change.js';
import { bookingStatuses, holdsItsPlace, mayFollow, type BookingStatus } from './booking-status.js';
import { claimAnew, holderOf } from './claims.js';
import type { Database } from './database.js';
import { inTransaction, looking, type Tx } from './in-transaction.js';
import { refused, stale, type PlacingOutcome } from './outcomes.js';
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

const holding = bookingStatuses.filter(holdsItsPlace);

/** Bookings: requests with a place on the board. */
export function bookingsIn(database: Database) {
  const change = (
    id: string,
    version: number,
    who: string,
    atMs: number,
    work: (before: StoredBooking) => Omit<BookingChange, 'before'> | PlacingOutcome,
  ): Promise<PlacingOutcome> =>
    inTransaction(database, { who, atMs }, async (tx) => {
      const row = await tx.db
        .selectFrom('booking')
        .selectAll()
        .where('id', '=', id)
        .executeTakeFirst();
      if (row === undefined) return refused(`there is no booking ${id}`);
      const before = bookingFrom(row);
      if (before.version !== version) return stale(`booking ${id}`, version, before.version);
      const wanted = work(before);
      return 'kind' in wanted ? wanted : changeBooking(tx, { before, ...wanted });
    });

  const move = (id: string, version: number, to: Move, who: string, atMs: number) =>
    change(id, version, who, atMs, (before) => {
      if (before.status !== 'booked' && before.status !== 'arrived') {
        return refused(`booking ${id} is ${before.status}`);
      }
      const after = moved(before, to);
      const resized = after.slotMin !== before.slotMin;
      const elsewhere =
        after.scannerId !== before.scannerId ||
        after.date !== before.date ||
        after.startMin !== before.startMin;
      return { after, action: resized && !elsewhere ? 'resized' : 'moved' };
    });

  const setStatus = (
    id: string,
    version: number,
    status: Exclude<BookingStatus, 'fulfilled'>,
    who: string,
    atMs: number,
  ) =>
    change(id, version, who, atMs, (before) =>
      mayFollow[before.status].includes(status)
        ? { after: { ...before, status }, action: status }
        : refused(`booking ${id} is ${before.status}, which ${status} cannot follow`),
    );

  return {
    place: (wanted: NewBooking, who: string, atMs: number): Promise<PlacingOutcome> =>
      inTransaction(database, { who, atMs }, (tx) => placeBooking(tx, wanted)),

    move,

    /** A longer or shorter slot from the same start. */
    resize: (
      id: string,
      version: number,
      to: { readonly slotMin: number; readonly plan?: unknown },
      who: string,
      atMs: number,
    ) => move(id, version, to, who, atMs),

    /** Gives the place back; the request waits again. */
    cancel: (id: string, version: number, who: string, atMs: number) =>
      setStatus(id, version, 'cancelled', who, atMs),

    /** `fulfilled` is not among them: that is `owed.recordDone`. */
    setStatus,

    /** Keeps a plan made for the place as it stands, for example after the request was changed. */
    keepPlan: (id: string, version: number, plan: unknown, who: string, atMs: number) =>
      change(id, version, who, atMs, (before) => ({
        after: { ...before, plan },
        action: 'planned',
      })),

    get: (id: string): Promise<StoredBooking | undefined> =>
      looking(database, async (db) => {
        const row = await db
          .selectFrom('booking')
          .selectAll()
          .where('id', '=', id)
          .executeTakeFirst();
        return row && bookingFrom(row);
      }),

    /** The place a request has now; none when it was cancelled or missed. */
    ofRequest: (requestId: string): Promise<StoredBooking | undefined> =>
      looking(database, async (db) => {
        const row = await db
          .selectFrom('booking')
          .selectAll()
          .where('request_id', '=', requestId)
          .where('status', 'in', holding)
          .executeTakeFirst();
        return row && bookingFrom(row);
      }),

    /** What holds a place on a day, by scanner and start. */
    listDay: (date: string) => listBetween(date, date),

    /** What holds a place from one ISO date to another, both included; on request also what left it. */
    listBetween,
  };

  function listBetween(
    from: string,
    until: string,
    options: { readonly withCancelled?: boolean } = {},
  ): Promise<readonly StoredBooking[]> {
    return looking(database, async (db) => {
      const rows = await db
        .selectFrom('booking')
        .selectAll()
        .where('date', '>=', from)
        .where('date', '<=', until)
        .where('status', 'in', options.withCancelled === true ? bookingStatuses : holding)
        .orderBy('date')
        .orderBy('scanner_id')
        .orderBy('start_min')
        .orderBy('id')
        .execute();
      return rows.map(bookingFrom);
    });
  }
}
export type Bookings = ReturnType<typeof bookingsIn>;

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
