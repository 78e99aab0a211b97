import type { Board } from './fill-board.js';
import { spotValue } from './fill-objective.js';
import { noonStep, type Ground, type SlotOption } from './fill-problem.js';

/** Free time that can be packed on its own: a stretch, or what lies between visits that a team pins to the minute. */
export interface Room {
  readonly stretch: number;
  readonly line: number;
  /** Steps from and to, as in a stretch. */
  readonly from: number;
  readonly to: number;
}

/** The part of the day in which a visit may start. */
export const anyTime = 0;
export const morning = 1;
export const afternoon = 2;
export type Part = 0 | 1 | 2;

/** Every offer of every request on every line, numbered through, in flat lists: the search asks for them millions of times. */
export interface OptionTable {
  readonly lines: number;
  readonly part: Int8Array;
  /** First number and how many, at `request * lines + line`; in order of steps. */
  readonly first: Int32Array;
  readonly count: Int32Array;
  readonly steps: Int32Array;
  readonly value: Float64Array;
  readonly options: readonly SlotOption[];
}

/** Rooms in order of stretch and time; who stands pinned on the board makes walls. */
export function roomsOf(ground: Ground, board: Board): readonly Room[] {
  return ground.stretches.flatMap(({ line, from, to }, stretch) => {
    const rooms: Room[] = [];
    let free = from;
    board.seatsOf(stretch).forEach((seat, i) => {
      if (!isPinned(ground, seat.request)) return;
      const start = board.startsOf(stretch)[i]!;
      rooms.push({ stretch, line, from: free, to: start });
      free = start + seat.option.steps;
    });
    rooms.push({ stretch, line, from: free, to });
    return rooms;
  });
}

/** Requests with a team are left out: when they can start hangs on other scanners. */
export const isPinned = (ground: Ground, request: number): boolean =>
  ground.problem.waiting[request]!.team !== undefined;

export function optionTable(ground: Ground): OptionTable {
  const count = ground.problem.waiting.length;
  const lines = ground.lines.length;
  const part = new Int8Array(count);
  const first = new Int32Array(count * lines);
  const many = new Int32Array(count * lines);
  const options: SlotOption[] = [];
  const value: number[] = [];
  for (let r = 0; r < count; r++)
    for (let l = 0; l < lines; l++) {
      first[r * lines + l] = options.length;
      const window = ground.lines[l]!.windows[r];
      if (window === undefined || isPinned(ground, r)) continue;
      part[r] = window.release >= noonStep ? afternoon : window.last < noonStep ? morning : anyTime;
      many[r * lines + l] = window.options.length;
      for (const option of window.options) {
        options.push(option);
        value.push(spotValue(option, window.factor));
      }
    }
  return {
    ...{ lines, part, first, options },
    count: many,
    steps: Int32Array.from(options, (o) => o.steps),
    value: Float64Array.from(value),
  };
}
