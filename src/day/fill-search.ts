import { Board, type Seat, type Spot } from './fill-board.js';
import type { UpperBound } from './fill-bound.js';
import { compareFills, guideOf, type FillObjective } from './fill-objective.js';
import { priorityWorth, type Ground, type SlotOption } from './fill-problem.js';

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
  /** Prices of the bound: whom to place first, and what time is worth where. */
  readonly prices?: Pick<UpperBound, 'requestPrices' | 'stepPrices'>;
}

/**
 * Ruin and recreate (Schrimpf and others 2000): take a few neighbours out, put everybody who waits back by best insertion
 * with a random price on time, keep it or undo it by the rule of simulated annealing (Kirkpatrick and others 1983).
 */
export function* searchFill(
  ground: Ground,
  { iterations, random, reportEvery = 50, prices }: SearchOptions,
): Generator<SearchProgress, SearchProgress> {
  const board = new Board(ground);
  const count = ground.problem.waiting.length;
  const tables = { ...tablesOf(ground), ...prices };
  const { scale } = tables;
  recreate(board, tables, random, 0);
  let objective = board.objective();
  let guide = guideOf(objective);
  let best = board.copy();
  let bestObjective = objective;
  for (let i = 0; i < iterations && count > 0; i++) {
    if (i % reportEvery === 0)
      yield { iteration: i, of: iterations, best: best.copy(), objective: bestObjective };
    const done = i / iterations;
    // Answers first, then the end settles overruns, coils and waiting.
    const warmth =
      done < 0.85 ? 0.3 * scale * 200 ** (-done / 0.85) : 1e-4 * 1e-6 ** ((done - 0.85) / 0.15);
    const before = ground.stretches.map((_, s) => board.seatsOf(s));
    if (random() < 0.5) force(board, tables, random);
    else ruin(board, random);
    recreate(board, tables, random, 0.02);
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
  recreate(last, tables, () => 0.19, 0);
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

/**
 * Puts one request that could have more into a stretch with room for more, in place of as few neighbours as it takes;
 * they are placed again with everybody else.
 */
function force(board: Board, tables: Tables, random: () => number): void {
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

/** Best insertion of everybody who waits, in a random kind of order, then a look whether a longer slot fits. */
function recreate(board: Board, tables: Tables, random: () => number, blink: number): void {
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

function valueNow(board: Board, request: number): number {
  const stretch = board.where[request]!;
  const seat = stretch < 0 ? undefined : board.seatsOf(stretch).find((x) => x.request === request);
  return seat === undefined ? 0 : spotValue(seat.option, seat.factor);
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

/** What is known of each request before the search: the best it could get anywhere, in all and per step, and its length. */
interface Tables {
  readonly top: readonly number[];
  readonly perStep: readonly number[];
  readonly length: readonly number[];
  /** Mean of the tops: the scale on which answers differ. */
  readonly scale: number;
  /** Worth of a step of scanner time, about. */
  readonly density: number;
  readonly requestPrices?: readonly number[];
  readonly stepPrices?: readonly number[];
}

function tablesOf(ground: Ground): Tables {
  const top: number[] = [];
  const perStep: number[] = [];
  const length: number[] = [];
  ground.problem.waiting.forEach((_, r) => {
    let best = 0;
    let steps = 1;
    let ratio = 0;
    for (const stretch of ground.stretches) {
      const w = ground.lines[stretch.line]!.windows[r];
      for (const o of w?.options ?? []) {
        const v = spotValue(o, w!.factor);
        if (o.steps > stretch.to - stretch.from) continue;
        ratio = Math.max(ratio, v / o.steps);
        if (v > best) {
          best = v;
          steps = o.steps;
        }
      }
    }
    top.push(best);
    perStep.push(ratio);
    length.push(steps);
  });
  const sum = (list: readonly number[]) => list.reduce((a, b) => a + b, 0);
  return {
    ...{ top, perStep, length },
    scale: Math.max(1e-3, sum(top) / Math.max(1, top.length)),
    density: sum(top) / Math.max(1, sum(length)),
  };
}

/** By what the requests that wait are taken in turn: chance, worth, worth per step, length. */
function orderKey(tables: Tables, random: () => number): readonly number[] {
  const kind = Math.floor(random() * (tables.requestPrices === undefined ? 4 : 6));
  if (kind === 0) return tables.top.map(() => random());
  const list =
    kind === 1
      ? tables.top
      : kind === 2
        ? tables.perStep
        : kind === 3
          ? tables.length
          : tables.requestPrices!;
  return list.map((v) => v * (0.8 + 0.4 * random()));
}
