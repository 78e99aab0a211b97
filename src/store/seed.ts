import type { ExamRequest } from '../planning/index.js';
import { placeBooking, type NewBooking } from './placing.js';
import type { Database } from './database.js';
import { inTransaction } from './in-transaction.js';
import type { PlacingOutcome } from './outcomes.js';
import { addRequest } from './requests.js';

export interface Seed {
  readonly requests: readonly ExamRequest[];
  readonly bookings: readonly NewBooking[];
}

export interface Seeded {
  readonly kind: 'seeded';
  /** How many were new. */
  readonly requests: number;
  readonly bookings: number;
  /** Bookings of new requests that could not be placed; the requests wait. */
  readonly left: readonly {
    readonly requestId: string;
    readonly outcome: Exclude<PlacingOutcome, { kind: 'placed' }>;
  }[];
}

/**
 * Puts in the requests that are not there yet, with their bookings, all or nothing. A request that is
 * known is left alone, its booking too: a second seed does not bring back what people cancelled.
 */
export function seedInto(
  database: Database,
  seed: Seed,
  who: string,
  atMs: number,
): Promise<Seeded> {
  return inTransaction(database, { who, atMs }, async (tx) => {
    const added = new Set<string>();
    for (const body of seed.requests) {
      if ((await addRequest(tx, body)).kind === 'added') added.add(body.id);
    }
    let bookings = 0;
    const left: Seeded['left'][number][] = [];
    for (const wanted of seed.bookings) {
      if (!added.has(wanted.requestId)) continue;
      const outcome = await placeBooking(tx, wanted);
      if (outcome.kind === 'placed') bookings += 1;
      else left.push({ requestId: wanted.requestId, outcome });
    }
    return { kind: 'seeded', requests: added.size, bookings, left };
  });
}
