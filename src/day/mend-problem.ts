import type { TakenPlace, WaitingRequest } from './fill-problem.js';
import type { Booking, Department } from './scanners.js';

/** A booked visit with what is known of the request: without `offers` it can keep its scanner and slot length only. */
export interface BookedVisit extends TakenPlace {
  readonly request: WaitingRequest;
}

export type DayEvent =
  | {
      readonly kind: 'scanner down' | 'staff gone';
      readonly scannerId: string;
      readonly date: string;
      readonly fromMin: number;
      readonly toMin: number;
    }
  | {
      readonly kind: 'team gone';
      readonly team: string;
      readonly date: string;
      readonly fromMin: number;
      readonly toMin: number;
    }
  | { readonly kind: 'late'; readonly requestId: string; readonly minutes: number }
  | { readonly kind: 'overrun'; readonly requestId: string; readonly minutes: number }
  | { readonly kind: 'emergency'; readonly request: WaitingRequest }
  | { readonly kind: 'no-show'; readonly requestId: string };

export interface MendProblem {
  readonly department: Department;
  readonly visits: readonly BookedVisit[];
  readonly event: DayEvent;
  /** Now: no visit can begin before it. */
  readonly now: { readonly date: string; readonly minute: number };
  /** Visits that start before this are on their way in: they are not moved, and nobody is called in for sooner. */
  readonly movableFrom: { readonly date: string; readonly minute: number };
  /** Others known to be on their way in. */
  readonly onTheWay?: ReadonlySet<string>;
  /** Requests that could take a place that falls free. */
  readonly waiting?: readonly WaitingRequest[];
}

/** One person's change. */
export interface Move {
  readonly requestId: string;
  /** Absent for an emergency, which had no place. */
  readonly from?: Booking;
  readonly to: Booking;
  /** Minutes between the two starts; a day counts 1440. */
  readonly shiftMin: number;
  /** What the person gains or loses in answers, in words. */
  readonly answers: string;
  /** Weight answered diagnostically after, less before. */
  readonly diagnosticChange: number;
  /** Why this person: the one the event befell, or whose place was needed, and by whom. */
  readonly because: string;
}

/** Whoever is shifted by more than this is moved far: a proposal that spares them stands beside the first. */
export const farShiftMin = 120;

export interface Repair {
  readonly moves: readonly Move[];
  /** People whose place is gone and who get none on the planned days. */
  readonly withoutPlace: readonly { readonly requestId: string; readonly why: string }[];
  /** On their way in or there already: they keep their place and begin later. */
  readonly waitOnSite: readonly {
    readonly requestId: string;
    readonly from: Booking;
    readonly to: Booking;
  }[];
  /** On their way in and cannot be served where they are: somebody must speak with them. */
  readonly stuck: readonly { readonly requestId: string; readonly why: string }[];
  /** Booked people who get another start, scanner or day, or lose their place. The emergency itself is not counted. */
  readonly peopleMoved: number;
  readonly shiftMin: number;
  /** True when it is proved that no repair of its kind leaves fewer without a place or moves fewer people. */
  readonly fewest: boolean;
  /** Whether slots may have been shortened at the cost of answers. */
  readonly shorterSlots: boolean;
  /** Nobody was to be shifted by more than this, at the cost of more people moved; absent: no limit. */
  readonly shiftLimitMin?: number;
}

export interface MendOutcome {
  /** Least disturbing first; nothing is applied by any of them. */
  readonly proposals: readonly Repair[];
  /** A stretch that falls free, and who of those waiting could come. */
  readonly freed?: { readonly place: Booking; readonly couldCome: readonly string[] };
}
