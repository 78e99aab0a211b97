import type { ScannerAbilities } from '../sequences/index.js';

/** A stretch of a working day, whole minutes since the site's midnight, `toMin` not included. */
export interface DayStretch {
  readonly fromMin: number;
  readonly toMin: number;
}

/** A scanner with the hours it is staffed. */
export interface Scanner extends ScannerAbilities {
  readonly hours: readonly DayStretch[];
  readonly breaks: readonly DayStretch[];
}

/** A department: its scanners, its zone (IANA name), the days planned. */
export interface Department {
  readonly name: string;
  readonly zone: string;
  readonly scanners: readonly Scanner[];
  /** ISO dates. */
  readonly days: readonly string[];
}

/** A request's place: a scanner, a day, a start. */
export interface Booking {
  readonly requestId: string;
  readonly scannerId: string;
  /** ISO date. */
  readonly date: string;
  /** Whole minutes since the site's midnight. */
  readonly startMin: number;
  readonly slotMin: number;
}
