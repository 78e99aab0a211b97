import { z } from 'zod';
import { changeBooking, type BookingState } from './booking-change.js';
import { bookingStatuses } from './booking-status.js';
import { releaseClaims } from './claims.js';
import { TakenBack, type Tx } from './in-transaction.js';
import { refused, type Refused } from './outcomes.js';
import { bookingFrom, type StoredBooking } from './stored.js';

export type UndoOutcome =
  | {
      readonly kind: 'undone';
      /** The change that was put back, in words: "R-101 moved"; of a joint change every one. */
      readonly what: string;
      readonly booking: StoredBooking;
    }
  | Refused;

/** What the history kept of a booking; the plan only where it changed. */
const image = z.object({
  scannerId: z.string(),
  date: z.string(),
  startMin: z.number(),
  slotMin: z.number(),
  teams: z.array(z.string()),
  status: z.enum(bookingStatuses),
  plan: z.unknown().optional(),
});

/** Kept plans are made from the rest and are nobody's doing. */
const planOnly = ['planned', 'plan dropped'];

/** A change that could be put back. */
interface Standing {
  readonly seq: number;
  readonly thing_id: string;
  readonly action: string;
  readonly before: string | null;
}

/**
 * Puts back the last change of a person to a booking, as a new change. A change and its undo cancel
 * out, so undoing again goes one step further back. Bookings that were changed together are put back together,
 * or not at all: one by one, two that swapped places could never go back.
 */
export async function undoLast(tx: Tx): Promise<UndoOutcome> {
  const last = await standing(tx)
    .where('change.who', '=', tx.who)
    .where('change.action', 'not in', planOnly)
    .orderBy('change.seq', 'desc')
    .limit(1)
    .executeTakeFirst();
  if (last === undefined) return refused('there is nothing of yours to undo');
  const changes: readonly Standing[] =
    last.joint === null
      ? [last]
      : await standing(tx)
          .where('change.joint', '=', last.joint)
          .orderBy('change.seq', 'desc')
          .execute();
  const put: { readonly change: Standing; readonly current: StoredBooking }[] = [];
  for (const change of changes) {
    const current = await bookingNow(tx, change);
    const why = await whyNot(tx, change, current);
    if (why !== undefined) return refused(why);
    put.push({ change, current });
  }
  const first = put[0]!;
  const what = `${first.current.requestId} ${first.change.action}`;
  const others = put.slice(1).map(({ change, current }) => `${current.requestId} ${change.action}`);
  if (others.length > 0) {
    await releaseClaims(
      tx,
      put.map(({ current }) => current.id),
    );
  }
  const bookings: StoredBooking[] = [];
  for (const { change, current } of put) {
    const back = await changeBooking(tx, {
      before: current,
      after: await stateBefore(tx, change, current),
      action: 'undone',
      undoes: change.seq,
    });
    if (back.kind === 'placed') {
      bookings.push(back.booking);
      continue;
    }
    const why = back.kind === 'taken' ? `the place went to ${back.by.requestId}` : back.why;
    throw new TakenBack<UndoOutcome>(refused(`"${current.requestId} ${change.action}": ${why}`));
  }
  return { kind: 'undone', what: [what, ...others].join(', '), booking: bookings[0]! };
}

async function bookingNow(tx: Tx, change: Standing): Promise<StoredBooking> {
  const row = await tx.db
    .selectFrom('booking')
    .selectAll()
    .where('id', '=', change.thing_id)
    .executeTakeFirstOrThrow();
  return bookingFrom(row);
}

/** Why a change cannot be put back before any place is looked at. */
async function whyNot(
  tx: Tx,
  change: Standing,
  current: StoredBooking,
): Promise<string | undefined> {
  const newer = await standing(tx)
    .where('change.thing_id', '=', change.thing_id)
    .where('change.seq', '>', change.seq)
    .where('change.action', '<>', 'planned')
    .limit(1)
    .executeTakeFirst();
  if (newer !== undefined) {
    return `"${current.requestId} ${change.action}" was followed by "${newer.action}" (${newer.who})`;
  }
  return current.status === 'fulfilled'
    ? `${current.requestId}: its answers are on record`
    : undefined;
}

/** Changes of bookings that stand: neither undone nor an undo. */
const standing = (tx: Tx) =>
  tx.db
    .selectFrom('change')
    .select(['change.seq', 'change.who', 'change.thing_id', 'change.action'])
    .select(['change.before', 'change.joint'])
    .where('change.what', '=', 'booking')
    .where('change.undoes', 'is', null)
    .where(({ not, exists, selectFrom }) =>
      not(
        exists(
          selectFrom('change as undo')
            .select('undo.seq')
            .whereRef('undo.undoes', '=', 'change.seq'),
        ),
      ),
    );

/** The booking as it was before a change; before it was placed it had no place, so that is a cancelled one. */
async function stateBefore(
  tx: Tx,
  change: { readonly seq: number; readonly before: string | null },
  current: StoredBooking,
): Promise<BookingState> {
  if (change.before === null) return { ...current, status: 'cancelled' };
  const was = image.parse(JSON.parse(change.before));
  const requestChanged = await tx.db
    .selectFrom('change')
    .select('seq')
    .where('what', '=', 'request')
    .where('thing_id', '=', current.requestId)
    .where('action', '=', 'changed')
    .where('seq', '>', change.seq)
    .limit(1)
    .executeTakeFirst();
  const sameFit = was.scannerId === current.scannerId && was.slotMin === current.slotMin;
  const kept = 'plan' in was ? was.plan : sameFit ? current.plan : null;
  return { ...was, plan: requestChanged === undefined ? kept : null };
}
