import type { CanCome, Priority } from '../planning/index.js';
import { freeGaps } from './gaps.js';
import { overrunPercent, undominated, type Offer } from './offers.js';
import type { Booking, Department } from './scanners.js';

/** A request waiting for a place. */
export interface WaitingRequest {
  readonly id: string;
  readonly priority: Priority;
  /** ISO date; hard for `stat` and `asap`. */
  readonly dueDate?: string;
  readonly canCome: CanCome;
  /** Coil the exam needs: a change between neighbours costs the technologist time. */
  readonly coil: string;
  /** A team that exists once (anaesthesia, play specialist) and must be there for the whole slot. */
  readonly team?: string;
  readonly offers: ReadonlyMap<string, readonly Offer[]>;
  /** Why a scanner without offers cannot take it. */
  readonly cannot?: ReadonlyMap<string, string>;
}

/** A place already given away. */
export interface TakenPlace extends Booking {
  readonly coil?: string;
  readonly team?: string;
}

export interface FillProblem {
  readonly department: Department;
  readonly taken: readonly TakenPlace[];
  readonly waiting: readonly WaitingRequest[];
}

export const stepMin = 5;
export const noonStep = (12 * 60) / stepMin;

/** What an answer counts by priority: site convention of this tool, each step doubles. Source: common practice, no source. */
export const priorityWorth: Readonly<Record<Priority, number>> = {
  routine: 1,
  urgent: 2,
  asap: 4,
  stat: 8,
};
/** An answer by its due date counts twice an answer after it. */
export const onTimeFactor = 2;

/** An offer in steps, its answers multiplied by priority. */
export interface SlotOption {
  readonly offer: Offer;
  readonly steps: number;
  readonly diagnostic: number;
  readonly targeted: number;
  readonly screening: number;
  readonly overrun: number;
}

/** A request on one scanner and day: when it may start, in steps since midnight. */
export interface Window {
  readonly release: number;
  readonly last: number;
  /** 2 on time, 1 after the due date. */
  readonly factor: number;
  readonly options: readonly SlotOption[];
}

/** A scanner's day; `windows` per request, undefined where it cannot be. */
export interface Line {
  readonly scannerId: string;
  readonly date: string;
  readonly dayIndex: number;
  readonly windows: readonly (Window | undefined)[];
  /** Bookings that stand there, in order. */
  readonly taken: readonly TakenPlace[];
}

/** A free stretch of a line, steps. */
export interface Stretch {
  readonly line: number;
  readonly from: number;
  readonly to: number;
}

export interface Ground {
  readonly problem: FillProblem;
  readonly lines: readonly Line[];
  readonly stretches: readonly Stretch[];
  /** Stretch numbers per line, in order of time. */
  readonly ofLine: readonly (readonly number[])[];
}

const anyStart = 24 * 60;

/** Whether the due date binds: an emergency after it is no answer. */
export const dueBinds = (request: Pick<WaitingRequest, 'priority'>): boolean =>
  request.priority === 'stat' || request.priority === 'asap';

/** Why a request cannot come on a date, or undefined when it can. */
export function dateRefusal(request: WaitingRequest, date: string): string | undefined {
  const { canCome, dueDate } = request;
  if (canCome.from !== undefined && date < canCome.from) return `can come from ${canCome.from}`;
  if (canCome.until !== undefined && date > canCome.until) return `can come until ${canCome.until}`;
  if (dueBinds(request) && dueDate !== undefined && date > dueDate)
    return `${request.priority}, due ${dueDate}`;
  return undefined;
}

/** Earliest and latest start by the part of the day the patient can come, steps. */
export function partWindow(canCome: CanCome): { readonly release: number; readonly last: number } {
  return {
    release: canCome.partOfDay === 'afternoon' ? noonStep : 0,
    last: canCome.partOfDay === 'morning' ? noonStep - 1 : anyStart,
  };
}

/** Lines, free stretches and windows: everything the solvers look at, worked out once. */
export function layOut(problem: FillProblem): Ground {
  const { department, taken, waiting } = problem;
  const lines: Line[] = [];
  const stretches: Stretch[] = [];
  const ofLine: number[][] = [];
  const optionsOf = waiting.map(
    (request) =>
      new Map(
        [...request.offers].map(([scanner, offers]) => [scanner, slotOptions(request, offers)]),
      ),
  );
  for (const [dayIndex, date] of department.days.entries()) {
    for (const scanner of department.scanners) {
      const there = taken
        .filter((b) => b.scannerId === scanner.id && b.date === date)
        .sort((a, b) => a.startMin - b.startMin);
      const numbers: number[] = [];
      for (const gap of [...freeGaps(scanner, there, stepMin)].sort(
        (a, b) => a.fromMin - b.fromMin,
      )) {
        const from = Math.ceil(gap.fromMin / stepMin);
        const to = Math.floor(gap.toMin / stepMin);
        if (to <= from) continue;
        numbers.push(stretches.length);
        stretches.push({ line: lines.length, from, to });
      }
      ofLine.push(numbers);
      lines.push({
        scannerId: scanner.id,
        date,
        dayIndex,
        taken: there,
        windows: waiting.map((request, r): Window | undefined => {
          const options = optionsOf[r]?.get(scanner.id) ?? [];
          if (options.length === 0 || dateRefusal(request, date) !== undefined) return undefined;
          const late = request.dueDate !== undefined && date > request.dueDate;
          return { ...partWindow(request.canCome), factor: late ? 1 : onTimeFactor, options };
        }),
      });
    }
  }
  return { problem, lines, stretches, ofLine };
}

function slotOptions(request: WaitingRequest, offers: readonly Offer[]): readonly SlotOption[] {
  const worth = priorityWorth[request.priority];
  return undominated(offers.filter((o) => o.screening > 0)).map((offer) => ({
    offer,
    steps: Math.ceil(offer.slotMin / stepMin),
    diagnostic: worth * offer.diagnostic,
    targeted: worth * offer.targeted,
    screening: worth * offer.screening,
    overrun: overrunPercent(offer),
  }));
}
