import type { Board, Spot } from './fill-board.js';
import { spotValue } from './fill-objective.js';
import { priorityWorth } from './fill-problem.js';
import { orderKey, type SearchTables } from './fill-tables.js';

/** Best insertion of everybody who waits, in a random kind of order, then a look whether a longer slot fits. */
export function recreate(
  board: Board,
  tables: SearchTables,
  random: () => number,
  blink: number,
): void {
  const { problem } = board.ground;
  const waiting = board.where.flatMap((s, r) => (s < 0 ? [r] : []));
  const key = orderKey(tables, random);
  waiting.sort((a, b) => key[b]! - key[a]!);
  const { stepPrices } = tables;
  const priced = stepPrices !== undefined && random() < 0.6;
  const level = random() < 0.2 ? 0 : priced ? 0.5 + random() : tables.density * 1.2 * random();
  const alone = random() < 0.5 ? 1e-6 : 1e-4;
  for (const r of waiting) {
    let top: Spot | undefined;
    let topValue = -Infinity;
    const worth = priorityWorth[problem.waiting[r]!.priority];
    board.eachSpot(r, (spot) => {
      if (blink > 0 && random() < blink) return;
      const value =
        spotValue(spot.option, spot.window.factor) -
        level * (priced ? stepPrices[spot.stretch]! : 1) * spot.option.steps -
        alone * coilPenalty(board, r, spot) -
        1e-10 *
          worth *
          (spot.start +
            288 * board.ground.lines[board.ground.stretches[spot.stretch]!.line]!.dayIndex);
      if (value > topValue) {
        topValue = value;
        top = spot;
      }
    });
    if (top !== undefined) board.put(r, top);
  }
  lengthen(board);
}

function coilPenalty(board: Board, request: number, { stretch, position }: Spot): number {
  const { waiting } = board.ground.problem;
  const seats = board.seatsOf(stretch);
  const own = waiting[request]!.coil;
  const left = seats[position - 1];
  const right = seats[position];
  return (
    (left !== undefined && waiting[left.request]!.coil !== own ? 1 : 0) +
    (right !== undefined && waiting[right.request]!.coil !== own ? 1 : 0)
  );
}

/** Gives seats a longer slot, or any better one, where the stretch has room. */
function lengthen(board: Board): void {
  const { stretches, lines, problem } = board.ground;
  for (let s = 0; s < stretches.length; s++) {
    let seats = board.seatsOf(s);
    for (let i = 0; i < seats.length; i++) {
      const seat = seats[i]!;
      if (problem.waiting[seat.request]!.team !== undefined) continue;
      const window = lines[stretches[s]!.line]!.windows[seat.request];
      if (window === undefined) continue;
      const better = window.options
        .filter((o) => spotValue(o, seat.factor) > spotValue(seat.option, seat.factor) + 1e-9)
        .sort((a, b) => spotValue(b, seat.factor) - spotValue(a, seat.factor));
      for (const option of better) {
        if (
          board.replace(
            s,
            seats.map((x, j) => (j === i ? { ...x, option } : x)),
          )
        )
          break;
      }
      seats = board.seatsOf(s);
    }
  }
}
