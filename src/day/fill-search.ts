import { Board, type Seat, type Spot } from './fill-board.js';
import { compareFills, guideOf, type FillObjective } from './fill-objective.js';
import { onTimeFactor, priorityWorth, type Ground, type SlotOption } from './fill-problem.js';

export interface SearchProgress {
  readonly iteration: number;
  readonly of: number;
  readonly best: Board;
  readonly objective: FillObjective;
}

export interface SearchOptions {
  /** Budget in iterations, so that a result repeats; the caller may stop at any report. */
  readonly iterations: number;
  /** Uniform numbers in [0, 1). */
  readonly random: () => number;
  readonly reportEvery?: number;
}

/**
 * Ruin and recreate (Schrimpf and others 2000): take a few neighbours out, put everybody who waits back by best insertion
 * with a random price on time, keep it or undo it by the rule of simulated annealing (Kirkpatrick and others 1983).
 */
export function* searchFill(
  ground: Ground,
  { iterations, random, reportEvery = 50 }: SearchOptions,
): Generator<SearchProgress, SearchProgress> {
  const board = new Board(ground);
  const count = ground.problem.waiting.length;
  const scale = meanWorth(ground);
  recreate(board, random, 0);
  let objective = board.objective();
  let guide = guideOf(objective);
  let best = board.copy();
  let bestObjective = objective;
  for (let i = 0; i < iterations && count > 0; i++) {
    if (i % reportEvery === 0)
      yield { iteration: i, of: iterations, best: best.copy(), objective: bestObjective };
    const done = i / iterations;
    // Answers first, then the last third settles overruns, coils and waiting.
    const warmth =
      done < 0.7 ? 0.3 * scale * 200 ** (-done / 0.7) : 1e-4 * 1e-6 ** ((done - 0.7) / 0.3);
    const before = ground.stretches.map((_, s) => board.seatsOf(s));
    ruin(board, random);
    recreate(board, random, 0.02);
    const next = board.objective();
    const nextGuide = guideOf(next);
    if (nextGuide >= guide + warmth * Math.log(1 - random())) {
      objective = next;
      guide = nextGuide;
      if (compareFills(objective, bestObjective) > 0) {
        best = board.copy();
        bestObjective = objective;
      }
    } else restore(board, before);
  }
  // Whoever a random blink passed over gets the free place after all.
  const last = best.copy();
  recreate(last, () => 0.19, 0);
  const lastObjective = last.objective();
  return compareFills(lastObjective, bestObjective) > 0
    ? { iteration: iterations, of: iterations, best: last, objective: lastObjective }
    : { iteration: iterations, of: iterations, best, objective: bestObjective };
}

function restore(board: Board, before: readonly (readonly Seat[])[]): void {
  // Emptied first: a request may stand in another stretch now, and must not be marked as waiting afterwards.
  const changed = before.flatMap((seats, s) => (seats === board.seatsOf(s) ? [] : [s]));
  for (const s of changed) board.replace(s, []);
  for (const s of changed) board.replace(s, before[s]!);
}

/** Takes out runs of neighbours from one to three stretches, or single requests anywhere. */
function ruin(board: Board, random: () => number): void {
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

/** Best insertion of everybody who waits, in a random kind of order, then a look whether a longer slot fits. */
function recreate(board: Board, random: () => number, blink: number): void {
  const { problem } = board.ground;
  const waiting = board.where.flatMap((s, r) => (s < 0 ? [r] : []));
  const key = orderKey(board.ground, random);
  waiting.sort((a, b) => key[b]! - key[a]!);
  const density = meanWorth(board.ground) / 5;
  const price = random() < 0.2 ? 0 : density * 1.5 * random();
  const alone = random() < 0.5 ? 1e-6 : 1e-4;
  for (const r of waiting) {
    let top: Spot | undefined;
    let topValue = -Infinity;
    const worth = priorityWorth[problem.waiting[r]!.priority];
    board.eachSpot(r, (spot) => {
      if (blink > 0 && random() < blink) return;
      const value =
        spotValue(spot.option, spot.window.factor) -
        price * spot.option.steps -
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

const spotValue = (o: SlotOption, factor: number): number =>
  factor * (o.diagnostic + 1e-2 * o.targeted + 1e-4 * o.screening) - 1e-5 * o.overrun;

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

/** By what the requests that wait are taken in turn: worth, worth per step, length, chance. */
function orderKey(ground: Ground, random: () => number): readonly number[] {
  const kind = Math.floor(random() * 4);
  return ground.problem.waiting.map((_, r) => {
    if (kind === 0) return random();
    let top = 0;
    for (const line of ground.lines)
      for (const o of line.windows[r]?.options ?? []) {
        const v = line.windows[r]!.factor * (o.diagnostic + 0.01 * o.targeted);
        top = Math.max(top, kind === 1 ? v : kind === 2 ? v / o.steps : o.steps);
      }
    return top * (0.8 + 0.4 * random());
  });
}

function meanWorth(ground: Ground): number {
  const { waiting } = ground.problem;
  if (waiting.length === 0) return 1;
  const sum = waiting.reduce((total, request) => {
    const top = Math.max(
      0,
      ...[...request.offers.values()].flatMap((offers) => offers.map((o) => o.diagnostic)),
    );
    return total + onTimeFactor * priorityWorth[request.priority] * top;
  }, 0);
  return Math.max(1e-3, sum / waiting.length);
}
