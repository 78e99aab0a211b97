import { z } from 'zod';
import { changeBooking, type BookingState } from './booking-change.js';
import { bookingStatuses } from './booking-status.js';
import type { Tx } from './in-transaction.js';
import { refused, type Refused } from './outcomes.js';
import { bookingFrom, type StoredBooking } from './stored.js';

export type UndoOutcome =
  | {
      readonly kind: 'undone';
      /** The change that was put back, in words: "R-101 moved". */
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

/**
 * Puts back the last change of a person to a booking, as a new change. A change and its undo cancel
 * out, so undoing again goes one step further back.
 */
export async function undoLast(tx: Tx): Promise<UndoOutcome> {
  const last = await standing(tx)
    .where('change.who', '=', tx.who)
    .where('change.action', 'not in', planOnly)
    .orderBy('change.seq', 'desc')
    .limit(1)
    .executeTakeFirst();
  if (last === undefined) return refused('there is nothing of yours to undo');
  const newer = await standing(tx)
    .where('change.thing_id', '=', last.thing_id)
    .where('change.seq', '>', last.seq)
    .where('change.action', '<>', 'planned')
    .limit(1)
    .executeTakeFirst();
  const row = await tx.db
    .selectFrom('booking')
    .selectAll()
    .where('id', '=', last.thing_id)
    .executeTakeFirstOrThrow();
  const current = bookingFrom(row);
  const what = `${current.requestId} ${last.action}`;
  if (newer !== undefined) {
    return refused(`"${what}" was followed by "${newer.action}" (${newer.who})`);
  }
  if (current.status === 'fulfilled')
    return refused(`${current.requestId}: its answers are on record`);
  const after = await stateBefore(tx, last, current);
  const put = await changeBooking(tx, {
    before: current,
    after,
    action: 'undone',
    undoes: last.seq,
  });
  if (put.kind === 'placed') return { kind: 'undone', what, booking: put.booking };
  if (put.kind === 'taken') return refused(`"${what}": the place went to ${put.by.requestId}`);
  return refused(`"${what}": ${put.why}`);
}

/** Changes of bookings that stand: neither undone nor an undo. */
const standing = (tx: Tx) =>
  tx.db
    .selectFrom('change')
    .select(['change.seq', 'change.who', 'change.thing_id', 'change.action', 'change.before'])
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
