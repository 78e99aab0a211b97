import { Anneal } from './fill-anneal.js';
import { Board, type Seat } from './fill-board.js';
import type { Prices } from './fill-draw.js';
import { compareFills, guideOf, type FillObjective } from './fill-objective.js';
import { isPinned } from './fill-rooms.js';
import type { Ground } from './fill-problem.js';
import { recreate } from './fill-recreate.js';
import { force, ruin } from './fill-ruin.js';
import { tablesOf, type SearchTables } from './fill-tables.js';

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
  readonly prices: Prices;
}

/** Steps of annealing that take about as long as one ruin and recreate of a whole board. */
const stepsAnIteration = 32;

/**
 * First who goes where, by annealing over packings; then, with the answers nearly fixed, overruns, coils and waiting by ruin
 * and recreate (Schrimpf and others 2000) of the board itself. Visits with a team hang on other scanners and are not for
 * the packings: where there are any, the board is searched before too.
 */
export function* searchFill(
  ground: Ground,
  { iterations, random, reportEvery = 50, prices }: SearchOptions,
): Generator<SearchProgress, SearchProgress> {
  const tables = tablesOf(ground, prices);
  const { waiting } = ground.problem;
  const whole = waiting.length === 0 ? 0 : iterations;
  const teams = waiting.some((_, r) => isPinned(ground, r));
  const annealFrom = Math.floor(teams ? 0.4 * whole : 0);
  const polishFrom = Math.floor(0.85 * whole);
  const first = new Board(ground);
  recreate(first, tables, random, 0);
  const best = new Best(first);
  let state: BoardSearch | undefined;
  let anneal: Anneal | undefined;
  for (let i = 0; i < whole; i++) {
    if (i % reportEvery === 0) {
      if (anneal !== undefined) best.offer(anneal.bestBoard());
      yield best.progress(i, iterations);
    }
    if (i === annealFrom) anneal = new Anneal(best.board, prices, tables.scale, random);
    if (i === polishFrom) {
      if (anneal !== undefined) best.offer(anneal.bestBoard());
      anneal = undefined;
      state = undefined;
    }
    if (anneal !== undefined) {
      const done = (i - annealFrom) / (polishFrom - annealFrom);
      anneal.step(stepsAnIteration, 0.05 * 0.02 ** done);
    } else {
      state ??= { board: best.board.copy(), objective: best.objective };
      const warmth =
        i < annealFrom
          ? 0.3 * tables.scale * 200 ** (-i / annealFrom)
          : 1e-4 * 1e-6 ** ((i - polishFrom) / (whole - polishFrom));
      stepBoard(state, tables, random, warmth);
      best.offer(state.board, state.objective);
    }
  }
  // Whoever a random blink passed over gets the free place after all.
  const last = best.board.copy();
  recreate(last, tables, () => 0.19, 0);
  best.offer(last);
  return best.progress(iterations, iterations);
}

/** The best board seen, by the order of the tiers and not by the guide. */
class Best {
  objective: FillObjective;
  constructor(public board: Board) {
    this.objective = board.objective();
  }
  offer(board: Board, objective = board.objective()): void {
    if (compareFills(objective, this.objective) <= 0) return;
    this.board = board.copy();
    this.objective = objective;
  }
  progress(iteration: number, of: number): SearchProgress {
    return { iteration, of, best: this.board.copy(), objective: this.objective };
  }
}

interface BoardSearch {
  readonly board: Board;
  objective: FillObjective;
}

/**
 * A few neighbours out, everybody who waits back by best insertion with a random price on time, kept or undone by the rule of
 * simulated annealing (Kirkpatrick and others 1983).
 */
function stepBoard(
  state: BoardSearch,
  tables: SearchTables,
  random: () => number,
  warmth: number,
): void {
  const { board } = state;
  const before = board.ground.stretches.map((_, s) => board.seatsOf(s));
  if (random() < 0.5) force(board, tables, random);
  else ruin(board, random);
  recreate(board, tables, random, 0.02);
  const next = board.objective();
  if (guideOf(next) >= guideOf(state.objective) + warmth * Math.log(1 - random()))
    state.objective = next;
  else restore(board, before);
}

function restore(board: Board, before: readonly (readonly Seat[])[]): void {
  // Emptied first: a request may stand in another stretch now, and must not be marked as waiting afterwards.
  const changed = before.flatMap((seats, s) => (seats === board.seatsOf(s) ? [] : [s]));
  for (const s of changed) board.replace(s, []);
  for (const s of changed) board.replace(s, before[s]!);
}
