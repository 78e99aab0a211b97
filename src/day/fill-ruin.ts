import type { Board, Seat } from './fill-board.js';
import { spotValue } from './fill-objective.js';
import type { SearchTables } from './fill-tables.js';

/** Takes out runs of neighbours from one to three stretches, or single requests anywhere. */
export function ruin(board: Board, random: () => number): void {
  const whole = (n: number) => Math.floor(random() * n);
  const placed = board.where.flatMap((s, r) => (s >= 0 ? [r] : []));
  if (placed.length === 0) return;
  if (random() < 0.25) {
    const many = 1 + whole(Math.min(5, placed.length));
    for (let i = 0; i < many; i++) board.take(placed[whole(placed.length)]!);
    return;
  }
  const runs = 1 + whole(3);
  for (let i = 0; i < runs; i++) {
    const s = board.where[placed[whole(placed.length)]!]!;
    if (s < 0) continue;
    const seats = board.seatsOf(s);
    const length = 1 + whole(Math.min(4, seats.length));
    const from = whole(seats.length - length + 1);
    board.replace(s, [...seats.slice(0, from), ...seats.slice(from + length)]);
  }
}

/**
 * Puts one request that could have more into a stretch with room for more, in place of as few neighbours as it takes;
 * they are placed again with everybody else.
 */
export function force(board: Board, tables: SearchTables, random: () => number): void {
  const { stretches, lines, problem } = board.ground;
  const whole = (n: number) => Math.floor(random() * n);
  const lacks = tables.top.map((top, r) => top - valueNow(board, r));
  const total = lacks.reduce((a, b) => a + b, 0);
  for (let tries = 0; tries < 8; tries++) {
    let request = whole(problem.waiting.length);
    if (total > 1e-3 && random() < 0.5) {
      // By what is lacking: a pressing request left out is tried first.
      let draw = random() * total;
      request = Math.max(
        0,
        lacks.findIndex((lack) => (draw -= lack) < 0),
      );
    }
    if (problem.waiting[request]!.team !== undefined) continue;
    const from = board.where[request]!;
    const least = valueNow(board, request);
    const s = whole(stretches.length);
    const limits = stretches[s]!;
    const window = lines[limits.line]!.windows[request];
    if (window === undefined) continue;
    const better = window.options.filter(
      (o) => o.steps <= limits.to - limits.from && spotValue(o, window.factor) > least,
    );
    if (better.length === 0) continue;
    const option = better[whole(better.length)]!;
    const seats = board.seatsOf(s).filter((x) => x.request !== request);
    const own: Seat = { request, option, ...window };
    const first = whole(seats.length + 1);
    for (let many = 0; first + many <= seats.length; many++) {
      const kept = [...seats.slice(0, first), own, ...seats.slice(first + many)];
      if (from >= 0 && from !== s) board.take(request);
      if (board.replace(s, kept)) return;
    }
  }
}

function valueNow(board: Board, request: number): number {
  const stretch = board.where[request]!;
  const seat = stretch < 0 ? undefined : board.seatsOf(stretch).find((x) => x.request === request);
  return seat === undefined ? 0 : spotValue(seat.option, seat.factor);
}
