import { nothingFilled, type FillObjective } from './fill-objective.js';
import {
  priorityWorth,
  stepMin,
  type Ground,
  type SlotOption,
  type Window,
} from './fill-problem.js';

/** A request in a stretch. Seats are never changed, only replaced: a board is undone by putting old rows back. */
export interface Seat {
  readonly request: number;
  readonly option: SlotOption;
  readonly release: number;
  readonly last: number;
  readonly factor: number;
}

/** One stretch filled: seats in order, each started as early as the one before lets it. */
interface Row {
  readonly seats: readonly Seat[];
  readonly starts: readonly number[];
  /** Latest start of each seat that still lets the later ones keep their limits. */
  readonly latest: readonly number[];
}

export interface Spot {
  readonly stretch: number;
  readonly position: number;
  readonly start: number;
  readonly option: SlotOption;
  readonly window: Window;
}

const emptyRow: Row = { seats: [], starts: [], latest: [] };
const stepsADay = (24 * 60) / stepMin;

/** Requests in sequence per free stretch, packed to the left; inserting looks at each position once. */
export class Board {
  private readonly rows: Row[];
  /** Stretch of each request, -1 when it waits. */
  readonly where: number[];

  constructor(readonly ground: Ground) {
    this.rows = ground.stretches.map(() => emptyRow);
    this.where = ground.problem.waiting.map(() => -1);
  }

  copy(): Board {
    const other = new Board(this.ground);
    this.rows.forEach((row, s) => (other.rows[s] = row));
    this.where.forEach((s, r) => (other.where[r] = s));
    return other;
  }

  seatsOf = (stretch: number): readonly Seat[] => this.rows[stretch]?.seats ?? [];
  startsOf = (stretch: number): readonly number[] => this.rows[stretch]?.starts ?? [];

  /** Puts seats into a stretch in this order; false, and nothing changed, when they do not fit. */
  replace(stretch: number, seats: readonly Seat[]): boolean {
    const limits = this.ground.stretches[stretch];
    if (limits === undefined) return false;
    const starts: number[] = [];
    let free = limits.from;
    for (const seat of seats) {
      const start = Math.max(free, seat.release);
      free = start + seat.option.steps;
      if (start > seat.last || free > limits.to) return false;
      starts.push(start);
    }
    const latest = new Array<number>(seats.length);
    let before = limits.to;
    for (let i = seats.length - 1; i >= 0; i--) {
      const seat = seats[i] as Seat;
      before = Math.min(seat.last, before - seat.option.steps);
      latest[i] = before;
    }
    for (const seat of this.seatsOf(stretch)) this.where[seat.request] = -1;
    for (const seat of seats) this.where[seat.request] = stretch;
    this.rows[stretch] = { seats, starts, latest };
    return true;
  }

  /** Calls `visit` for every place a request could be put without moving the order of others. */
  eachSpot(request: number, visit: (spot: Spot) => void, shortestOnly = false): void {
    const { stretches, lines } = this.ground;
    for (let s = 0; s < stretches.length; s++) {
      const limits = stretches[s]!;
      const window = lines[limits.line]!.windows[request];
      if (window === undefined) continue;
      const row = this.rows[s]!;
      const options = shortestOnly ? window.options.slice(0, 1) : window.options;
      let free = limits.from;
      for (let p = 0; p <= row.seats.length; p++) {
        const end = p === row.seats.length ? limits.to : row.latest[p]!;
        const earliest = Math.max(free, window.release);
        if (earliest > window.last) break;
        for (const option of options) {
          const start = this.teamStart(request, s, earliest, option.steps);
          if (start > window.last || start + option.steps > end) {
            if (start === earliest) break;
            continue;
          }
          visit({ stretch: s, position: p, start, option, window });
        }
        if (p < row.seats.length) free = row.starts[p]! + row.seats[p]!.option.steps;
      }
    }
  }

  put(request: number, spot: Spot): boolean {
    const seats = [...this.seatsOf(spot.stretch)];
    seats.splice(spot.position, 0, this.seatFor(request, spot));
    return this.replace(spot.stretch, seats);
  }

  /** The seat of a spot. A team that exists once is appointed to the minute: its seat does not slide. */
  seatFor(request: number, { option, window, start }: Spot): Seat {
    const { factor, release, last } = window;
    const pinned = this.ground.problem.waiting[request]?.team !== undefined;
    return pinned
      ? { request, option, factor, release: start, last: start }
      : { request, option, factor, release, last };
  }

  take(request: number): void {
    const stretch = this.where[request] ?? -1;
    if (stretch < 0) return;
    this.replace(
      stretch,
      this.seatsOf(stretch).filter((seat) => seat.request !== request),
    );
  }

  /** First start from `earliest` at which the request's team is free; `earliest` where it needs none. */
  private teamStart(request: number, stretch: number, earliest: number, steps: number): number {
    const { problem, lines, stretches, ofLine } = this.ground;
    const team = problem.waiting[request]?.team;
    if (team === undefined) return earliest;
    const { dayIndex } = lines[stretches[stretch]!.line]!;
    const busy: [number, number][] = [];
    lines.forEach((line, l) => {
      if (line.dayIndex !== dayIndex) return;
      for (const b of line.taken)
        if (b.team === team)
          busy.push([
            Math.floor(b.startMin / stepMin),
            Math.ceil((b.startMin + b.slotMin) / stepMin),
          ]);
      for (const s of ofLine[l] ?? [])
        this.seatsOf(s).forEach((seat, i) => {
          if (problem.waiting[seat.request]?.team === team)
            busy.push([this.startsOf(s)[i]!, this.startsOf(s)[i]! + seat.option.steps]);
        });
    });
    let start = earliest;
    for (const [from, to] of busy.sort((a, b) => a[0] - b[0]))
      if (start < to && from < start + steps) start = to;
    return start;
  }

  objective(): FillObjective {
    const sum = { ...nothingFilled } as { -readonly [K in keyof FillObjective]: number };
    const { problem, lines } = this.ground;
    this.rows.forEach(({ seats, starts }, s) => {
      const day = lines[this.ground.stretches[s]!.line]!.dayIndex * stepsADay;
      seats.forEach(({ request, option, factor }, i) => {
        sum.diagnostic += factor * option.diagnostic;
        sum.targeted += factor * option.targeted;
        sum.screening += factor * option.screening;
        sum.overrunPercent += option.overrun;
        sum.waiting += priorityWorth[problem.waiting[request]!.priority] * (day + starts[i]!);
      });
    });
    for (let l = 0; l < lines.length; l++) sum.coilChanges += this.coilChanges(l);
    return sum;
  }

  private coilChanges(l: number): number {
    const { problem, lines, stretches, ofLine } = this.ground;
    let coil: string | undefined;
    let changes = 0;
    const next = (following: string | undefined): void => {
      if (coil !== undefined && following !== undefined && coil !== following) changes++;
      coil = following;
    };
    const { taken } = lines[l]!;
    let t = 0;
    for (const s of ofLine[l] ?? []) {
      const from = stretches[s]!.from * stepMin;
      for (; t < taken.length && taken[t]!.startMin < from; t++) next(taken[t]!.coil);
      for (const seat of this.rows[s]!.seats) next(problem.waiting[seat.request]!.coil);
    }
    for (; t < taken.length; t++) next(taken[t]!.coil);
    return changes;
  }
}
