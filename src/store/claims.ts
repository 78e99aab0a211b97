import type { Tx } from './in-transaction.js';
import type { Holder } from './outcomes.js';
import { resourcesOf, ticksOf, type Place } from './ticks.js';

/** The first other booking that holds any piece of a place, if there is one. */
export async function holderOf(
  tx: Tx,
  place: Place,
  ownBookingId?: string,
): Promise<Holder | undefined> {
  const { fromTick, toTick } = ticksOf(place);
  const row = await tx.db
    .selectFrom('claim')
    .innerJoin('booking', 'booking.id', 'claim.booking_id')
    .select(['claim.resource', 'booking.id', 'booking.request_id', 'booking.scanner_id'])
    .select(['booking.date', 'booking.start_min', 'booking.slot_min'])
    .where('claim.resource', 'in', resourcesOf(place))
    .where('claim.tick', '>=', fromTick)
    .where('claim.tick', '<', toTick)
    .$if(ownBookingId !== undefined, (query) =>
      query.where('claim.booking_id', '<>', ownBookingId ?? ''),
    )
    .orderBy('claim.tick')
    .orderBy('claim.resource')
    .limit(1)
    .executeTakeFirst();
  return row === undefined
    ? undefined
    : {
        bookingId: row.id,
        resource: row.resource,
        requestId: row.request_id,
        scannerId: row.scanner_id,
        date: row.date,
        startMin: row.start_min,
        slotMin: row.slot_min,
      };
}

/** Gives back every piece that these bookings hold, so that they can swap places; each must claim anew. */
export async function releaseClaims(tx: Tx, bookingIds: readonly string[]): Promise<void> {
  await tx.db.deleteFrom('claim').where('booking_id', 'in', bookingIds).execute();
}

/** Makes a booking's claims those of its place, or none. */
export async function claimAnew(
  tx: Tx,
  bookingId: string,
  place: Place | undefined,
): Promise<void> {
  await tx.db.deleteFrom('claim').where('booking_id', '=', bookingId).execute();
  if (place === undefined) return;
  const { fromTick, toTick } = ticksOf(place);
  const rows = resourcesOf(place).flatMap((resource) =>
    Array.from({ length: toTick - fromTick }, (_, n) => ({
      resource,
      tick: fromTick + n,
      booking_id: bookingId,
    })),
  );
  // Three values a row, and a statement may bind a limited number of values.
  for (let at = 0; at < rows.length; at += rowsAtOnce) {
    await tx.db
      .insertInto('claim')
      .values(rows.slice(at, at + rowsAtOnce))
      .execute();
  }
}

const rowsAtOnce = 1000;
