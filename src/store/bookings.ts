import { changeBooking, type BookingChange } from './booking-change.js';
import { bookingStatuses, holdsItsPlace, mayFollow, type BookingStatus } from './booking-status.js';
import type { Database } from './database.js';
import { inTransaction, looking } from './in-transaction.js';
import { moveMany, type ManyChange, type ManyOutcome } from './move-many.js';
import { refused, stale, type PlacingOutcome } from './outcomes.js';
import { movedTo, placeBooking, type Move, type NewBooking } from './placing.js';
import { bookingFrom, type StoredBooking } from './stored.js';

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
    change(id, version, who, atMs, (before) => movedTo(before, to));

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

    /** Several bookings at once, all or none of them; places may be swapped between them. */
    moveMany: (changes: readonly ManyChange[], who: string, atMs: number): Promise<ManyOutcome> =>
      inTransaction(database, { who, atMs }, (tx) => moveMany(tx, changes)),

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
