import { z } from 'zod';
import type { ConsoleEvent, ConsoleHappening } from '../console/index.js';
import type { Database } from './database.js';
import { inTransaction, looking } from './in-transaction.js';
import { refused, type Refused } from './outcomes.js';

/** One tap as it is sent: its own id, its time on the exam's clock, what was tapped. */
export interface Tap {
  readonly tapId: string;
  /** Seconds since the slot began. */
  readonly atS: number;
  readonly happening: ConsoleHappening;
}

export type TapOutcome =
  { readonly kind: 'kept'; readonly events: readonly ConsoleEvent[] } | Refused;

const span = z.union([
  z.strictObject({ kind: z.literal('stated'), seconds: z.number().min(0).max(86_400) }),
  z.strictObject({ kind: z.literal('not asked') }),
]);
const id = z.string().min(1).max(120);

/** What can be tapped; anything else never gets into the log. */
export const happeningSchema = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('entered') }),
  z.strictObject({ kind: z.literal('started'), viewId: id, sequenceId: id }),
  z.strictObject({ kind: z.literal('clean') }),
  z.strictObject({ kind: z.literal('moved') }),
  z.strictObject({ kind: z.literal('hold failed'), afterS: z.number().min(0).max(300) }),
  z.strictObject({ kind: z.literal('stopped') }),
  z.strictObject({ kind: z.literal('injected') }),
  z.strictObject({ kind: z.literal('wants out') }),
  z.strictObject({
    kind: z.literal('statement'),
    still: span.exactOptional(),
    hold: span.exactOptional(),
    stay: span.exactOptional(),
  }),
  z.strictObject({ kind: z.literal('put first'), viewId: id }),
  z.strictObject({ kind: z.literal('dropped'), viewId: id }),
  z.strictObject({ kind: z.literal('ended') }),
  z.strictObject({ kind: z.literal('undone'), taken: z.number().int().min(1) }),
]);

/** The append-only log of each exam at the scanner. */
export function consoleLogIn(database: Database) {
  const list = (bookingId: string): Promise<readonly ConsoleEvent[]> =>
    looking(database, async (db) => {
      const rows = await db
        .selectFrom('console_tap')
        .select(['seq', 'at_s', 'body'])
        .where('booking_id', '=', bookingId)
        .orderBy('seq')
        .execute();
      return rows.map(eventFrom);
    });

  return {
    list,

    /** Zero of the exam's clock by the first tap, epoch ms; undefined before there is one. */
    zeroMs: (bookingId: string): Promise<number | undefined> =>
      looking(database, async (db) => {
        const row = await db
          .selectFrom('console_tap')
          .select(['at_s', 'at_ms'])
          .where('booking_id', '=', bookingId)
          .orderBy('seq')
          .executeTakeFirst();
        return row === undefined ? undefined : row.at_ms - row.at_s * 1000;
      }),

    /** Adds taps in the order given; a tap whose id is there already is passed over. Answers with the whole log. */
    append: (
      bookingId: string,
      taps: readonly Tap[],
      who: string,
      atMs: number,
    ): Promise<TapOutcome> =>
      inTransaction(database, { who, atMs }, async (tx) => {
        const booking = await tx.db
          .selectFrom('booking')
          .select('status')
          .where('id', '=', bookingId)
          .executeTakeFirst();
        if (booking === undefined) return refused(`there is no booking ${bookingId}`);
        if (booking.status !== 'booked' && booking.status !== 'arrived') {
          return refused(`booking ${bookingId} is ${booking.status}`);
        }
        const kept = await tx.db
          .selectFrom('console_tap')
          .select(['seq', 'at_s', 'body', 'tap_id'])
          .where('booking_id', '=', bookingId)
          .orderBy('seq')
          .execute();
        const known = new Set(kept.map((row) => row.tap_id));
        const events = kept.map(eventFrom);
        for (const tap of taps) {
          if (known.has(tap.tapId)) continue;
          known.add(tap.tapId);
          const seq = events.length + 1;
          const body = JSON.stringify(happeningSchema.parse(tap.happening));
          await tx.db
            .insertInto('console_tap')
            .values({
              booking_id: bookingId,
              seq,
              tap_id: tap.tapId,
              at_s: tap.atS,
              at_ms: atMs,
              who,
              body,
            })
            .execute();
          await tx.record({ what: 'console', id: bookingId, action: tap.happening.kind });
          events.push({ ...tap.happening, seq, atS: tap.atS });
        }
        return { kind: 'kept', events };
      }),
  };
}

export type ConsoleLog = ReturnType<typeof consoleLogIn>;

function eventFrom(row: { seq: number; at_s: number; body: string }): ConsoleEvent {
  const happening = happeningSchema.parse(JSON.parse(row.body)) as ConsoleHappening;
  return { ...happening, seq: row.seq, atS: row.at_s };
}
