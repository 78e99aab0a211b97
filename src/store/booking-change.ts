import { holdsItsPlace, requestStatusWith } from './booking-status.js';
import { claimAnew, holderOf } from './claims.js';
import type { Tx } from './in-transaction.js';
import { refused, type PlacingOutcome } from './outcomes.js';
import { setRequestStatus } from './request-status.js';
import { bookingFrom, type StoredBooking } from './stored.js';
import { assertPlace } from './ticks.js';

/** What of a booking can change. */
export type BookingState = Omit<StoredBooking, 'id' | 'version' | 'requestId'>;

export interface BookingChange {
  readonly before: StoredBooking;
  readonly after: BookingState;
  readonly action: string;
  readonly undoes?: number;
}

/**
 * The one way a booking changes: its row, its claims, its request's status and its line in the history
 * together. Taken places and requests that went elsewhere meanwhile are outcomes.
 */
export async function changeBooking(tx: Tx, change: BookingChange): Promise<PlacingOutcome> {
  const { before, after, action, undoes } = change;
  assertPlace(after);
  const holds = holdsItsPlace(after.status);
  if (holds && !holdsItsPlace(before.status)) {
    const why = await whyNotAgain(tx, before.requestId);
    if (why !== undefined) return refused(why);
  }
  const holder = holds ? await holderOf(tx, after, before.id) : undefined;
  if (holder !== undefined) return { kind: 'taken', by: holder };
  const row = await tx.db
    .updateTable('booking')
    .set({ ...columnsOf(after), version: before.version + 1 })
    .where('id', '=', before.id)
    .where('version', '=', before.version)
    .returningAll()
    .executeTakeFirstOrThrow();
  const booking = bookingFrom(row);
  await claimAnew(tx, before.id, holds ? after : undefined);
  await tx.record({
    what: 'booking',
    id: before.id,
    action,
    ...images(before, booking),
    ...(undoes === undefined ? {} : { undoes }),
  });
  // A place that was lost already says nothing about where its request is by now.
  if (before.status !== after.status && (holds || holdsItsPlace(before.status))) {
    await setRequestStatus(tx, before.requestId, requestStatusWith[after.status]);
  }
  return { kind: 'placed', booking };
}

/** Why a request cannot take back a place it has left. */
async function whyNotAgain(tx: Tx, requestId: string): Promise<string | undefined> {
  const { status } = await tx.db
    .selectFrom('request')
    .select('status')
    .where('id', '=', requestId)
    .executeTakeFirstOrThrow();
  return status === 'waiting' ? undefined : `request ${requestId} is ${status} meanwhile`;
}

export function columnsOf(state: BookingState) {
  return {
    scanner_id: state.scannerId,
    date: state.date,
    start_min: state.startMin,
    slot_min: state.slotMin,
    teams: JSON.stringify(state.teams),
    status: state.status,
    plan: planText(state.plan),
  };
}

const planText = (plan: unknown) =>
  plan === null || plan === undefined ? null : JSON.stringify(plan);

/** What the history keeps of a change: all but the plan, and the plan only where it changed. */
function images(before: StoredBooking, after: StoredBooking) {
  const samePlan = planText(before.plan) === planText(after.plan);
  const image = ({ plan, ...rest }: StoredBooking) => (samePlan ? rest : { ...rest, plan });
  return { from: image(before), to: image(after) };
}
