import type { Booking } from '../day/index.js';
import type { StoredBooking } from './stored.js';

/** Somebody changed the thing first; nothing was written. */
export interface Stale {
  readonly kind: 'stale';
  readonly why: string;
}

/** The rules do not allow it; nothing was written. */
export interface Refused {
  readonly kind: 'refused';
  readonly why: string;
}

/** Who holds what was asked for. */
export interface Holder extends Booking {
  readonly bookingId: string;
  /** `scanner:<id>` or `team:<id>`. */
  readonly resource: string;
}

export interface Taken {
  readonly kind: 'taken';
  readonly by: Holder;
}

/** What becomes of placing, moving, resizing, cancelling and of a new status: written, or why not. */
export type PlacingOutcome =
  { readonly kind: 'placed'; readonly booking: StoredBooking } | Taken | Stale | Refused;

export const refused = (why: string): Refused => ({ kind: 'refused', why });

export const stale = (thing: string, asked: number, now: number): Stale => ({
  kind: 'stale',
  why: `${thing} is at version ${now} by now, not ${asked}`,
});
