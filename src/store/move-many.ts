import { changeBooking, type BookingChange } from './booking-change.js';
import { mayFollow } from './booking-status.js';
import { releaseClaims } from './claims.js';
import { TakenBack, type Tx } from './in-transaction.js';
import { refused, stale, type Refused, type Stale, type Taken } from './outcomes.js';
import { movedTo, placeBooking, type Move, type NewBooking } from './placing.js';
import { bookingFrom, type StoredBooking } from './stored.js';

/** One part of a joint change: a booking moved, a booking taken off the board, or a request placed. */
export type ManyChange =
  | { readonly id: string; readonly version: number; readonly to: Move }
  | { readonly id: string; readonly version: number; readonly cancel: true }
  | { readonly place: NewBooking };

export type ManyOutcome =
  | {
      readonly kind: 'moved';
      /** In the order of the changes. */
      readonly bookings: readonly StoredBooking[];
      /** Number of the joint change, the same in every line of its history. */
      readonly joint: number;
    }
  | (Taken & { readonly wantedFor: string })
  | Stale
  | Refused;

/**
 * Several bookings changed together, all or none. They may take each other's places: all of them give theirs
 * back first, then each claims anew. A place that anybody else holds, or a version that is not the newest, refuses the whole.
 */
export async function moveMany(tx: Tx, changes: readonly ManyChange[]): Promise<ManyOutcome> {
  if (changes.length === 0) return refused('nothing was to be changed');
  const ids = changes.flatMap((c) => ('place' in c ? [] : [c.id]));
  const twice = ids.find((id, n) => ids.indexOf(id) !== n);
  if (twice !== undefined) return refused(`booking ${twice} is named twice`);
  const wanted = new Map<string, BookingChange>();
  for (const change of changes) {
    if ('place' in change) continue;
    const read = await readChange(tx, change);
    if ('kind' in read) return read;
    wanted.set(change.id, read);
  }
  const joint = await jointNumber(tx);
  const together: Tx = { ...tx, record: (change) => tx.record({ ...change, joint }) };
  if (ids.length > 0) await releaseClaims(tx, ids);
  const bookings: StoredBooking[] = [];
  for (const change of changes) {
    const put =
      'place' in change
        ? await placeBooking(together, change.place)
        : await changeBooking(together, wanted.get(change.id)!);
    if (put.kind === 'placed') {
      bookings.push(put.booking);
      continue;
    }
    const wantedFor =
      'place' in change ? change.place.requestId : wanted.get(change.id)!.before.requestId;
    if (put.kind !== 'taken') throw new TakenBack<ManyOutcome>(put);
    throw new TakenBack<ManyOutcome>(
      bookings.some((b) => b.id === put.by.bookingId)
        ? refused(`${wantedFor} and ${put.by.requestId} would stand in the same place`)
        : { ...put, wantedFor },
    );
  }
  return { kind: 'moved', bookings, joint };
}

async function readChange(
  tx: Tx,
  change: Exclude<ManyChange, { place: unknown }>,
): Promise<BookingChange | Stale | Refused> {
  const row = await tx.db
    .selectFrom('booking')
    .selectAll()
    .where('id', '=', change.id)
    .executeTakeFirst();
  if (row === undefined) return refused(`there is no booking ${change.id}`);
  const before = bookingFrom(row);
  if (before.version !== change.version) {
    return stale(`booking ${change.id}`, change.version, before.version);
  }
  if ('cancel' in change) {
    return mayFollow[before.status].includes('cancelled')
      ? { before, after: { ...before, status: 'cancelled' }, action: 'cancelled' }
      : refused(`booking ${change.id} is ${before.status}, which cancelled cannot follow`);
  }
  const to = movedTo(before, change.to);
  return 'kind' in to ? to : { before, ...to };
}

/** The newest line before a joint change: no two joint changes have the same, because each writes. */
async function jointNumber(tx: Tx): Promise<number> {
  const newest = await tx.db
    .selectFrom('change')
    .select(({ fn }) => fn.max('seq').as('seq'))
    .executeTakeFirst();
  return newest?.seq ?? 0;
}
