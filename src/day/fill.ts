import type { Board } from './fill-board.js';
import { upperBound, type BoundTier, type UpperBound } from './fill-bound.js';
import { fillExactly } from './fill-exact.js';
import { nothingFilled, type FillObjective } from './fill-objective.js';
import { layOut, stepMin, type FillProblem, type Ground } from './fill-problem.js';
import { searchFill } from './fill-search.js';
import { whyHere, whyWaiting, type NotPlaced } from './fill-why.js';
import type { Offer } from './offers.js';
import type { Booking } from './scanners.js';

/** A place proposed for a request; nothing is booked by it. */
export interface Placement extends Booking {
  readonly offer: Offer;
  /** Why this place, one sentence each. */
  readonly why: readonly string[];
}

/** The most any filling could reach, tier by tier, whatever else it gave up. */
export interface FillBound {
  readonly diagnostic: number;
  readonly targeted: number;
  readonly screening: number;
}

export interface FillProposal {
  readonly placements: readonly Placement[];
  readonly waiting: readonly NotPlaced[];
  readonly objective: FillObjective;
  readonly bound: FillBound;
  /** (bound - reached) / bound of the first tier, 0 when the bound is reached. */
  readonly gap: number;
  /** Which method, and what is proved. */
  readonly provedBy: string;
}

export interface FillProgress {
  readonly iteration: number;
  readonly of: number;
  readonly objective: FillObjective;
  readonly bound: FillBound;
  /** The proposal as it stands: stop whenever it is good enough. */
  readonly proposal: () => FillProposal;
}

export interface FillOptions {
  /** Search budget; a result repeats for the same budget and stream. */
  readonly iterations?: number;
  /** Uniform numbers in [0, 1), injected. */
  readonly random: () => number;
  /** Nodes the exact method may spend; 0 leaves it out. */
  readonly exactNodes?: number;
  readonly reportEvery?: number;
  /** Rounds of price improvement per tier of the bound; fewer give a looser bound, still a true one. */
  readonly boundRounds?: number;
}

/** Most requests the exact method is asked about. */
const exactUpTo = 8;

/**
 * Places waiting requests into the free time of scanners and days. Reports as it goes and returns the proposal; a caller
 * that has seen enough stops asking and takes `proposal()` of the last report.
 */
export function* fill(
  problem: FillProblem,
  options: FillOptions,
): Generator<FillProgress, FillProposal> {
  const {
    random,
    iterations = 2000,
    exactNodes = 100_000,
    reportEvery = 50,
    boundRounds = 400,
  } = options;
  const ground = layOut(problem);
  // A bound before there is an answer: its prices lead the search.
  const bounds = boundsOf(ground, nothingFilled, boundRounds);
  const early = boundsSay(bounds);
  const search = searchFill(ground, { iterations, random, reportEvery, prices: bounds.diagnostic });
  let step = search.next();
  while (step.done !== true) {
    const { iteration, of, best, objective } = step.value;
    yield {
      iteration,
      of,
      objective,
      bound: early,
      proposal: () =>
        proposalOf(
          ground,
          best,
          objective,
          boundsSay(boundsOf(ground, objective, boundRounds, bounds)),
          searchWords(iteration),
        ),
    };
    step = search.next();
  }
  const { best, objective } = step.value;
  const bound = boundsSay(boundsOf(ground, objective, boundRounds, bounds));
  const exact =
    problem.waiting.length <= exactUpTo && exactNodes > 0
      ? fillExactly(ground, best, exactNodes)
      : undefined;
  if (exact?.proved === true) {
    const { diagnostic, targeted, screening } = exact.objective;
    return proposalOf(
      ground,
      exact.best,
      exact.objective,
      {
        diagnostic,
        targeted: Math.max(targeted, bound.targeted),
        screening: Math.max(screening, bound.screening),
      },
      'exact branch and bound: no filling is better',
    );
  }
  return proposalOf(
    ground,
    exact?.best ?? best,
    exact?.objective ?? objective,
    bound,
    searchWords(iterations),
  );
}

const searchWords = (iterations: number) =>
  `annealing and ruin and recreate, ${iterations} iterations, held against a Lagrangian bound`;

/** Runs `fill` to its end. */
export function fillAll(problem: FillProblem, options: FillOptions): FillProposal {
  const run = fill(problem, options);
  let step = run.next();
  while (step.done !== true) step = run.next();
  return step.value;
}

type Bounds = Readonly<Record<BoundTier, UpperBound>>;

/** Rounds for the tiers after the first: they are not what the search is held against. */
const laterShare = 0.25;

/** Bounds of the three tiers; begun anew from earlier prices with a good answer to aim at, they come down further. */
function boundsOf(
  ground: Ground,
  reached: FillObjective,
  rounds: number,
  earlier?: Bounds,
): Bounds {
  const one = (tier: BoundTier, many: number): UpperBound => {
    const before = earlier?.[tier];
    const now = upperBound(ground, tier, reached[tier], many, before?.requestPrices);
    return before !== undefined && before.bound <= now.bound ? before : now;
  };
  return {
    diagnostic: one('diagnostic', rounds),
    targeted: one('targeted', Math.ceil(laterShare * rounds)),
    screening: one('screening', Math.ceil(laterShare * rounds)),
  };
}

const boundsSay = (bounds: Bounds): FillBound => ({
  diagnostic: bounds.diagnostic.bound,
  targeted: bounds.targeted.bound,
  screening: bounds.screening.bound,
});

/** The bookings a board stands for, in order of time and scanner. */
export function bookingsOf(ground: Ground, board: Board): readonly (Booking & { offer: Offer })[] {
  const { waiting } = ground.problem;
  return ground.stretches
    .flatMap((stretch, s) => {
      const { scannerId, date } = ground.lines[stretch.line]!;
      return board.seatsOf(s).map((seat, i) => ({
        requestId: waiting[seat.request]!.id,
        scannerId,
        date,
        startMin: board.startsOf(s)[i]! * stepMin,
        slotMin: seat.option.offer.slotMin,
        offer: seat.option.offer,
      }));
    })
    .sort(
      (a, b) =>
        a.date.localeCompare(b.date) ||
        a.scannerId.localeCompare(b.scannerId) ||
        a.startMin - b.startMin,
    );
}

function proposalOf(
  ground: Ground,
  board: Board,
  objective: FillObjective,
  bound: FillBound,
  provedBy: string,
): FillProposal {
  const bookings = bookingsOf(ground, board);
  const { problem } = ground;
  return {
    placements: bookings.map((b) => ({ ...b, why: whyHere(problem, bookings, b) })),
    waiting: problem.waiting.flatMap((request, r) =>
      (board.where[r] ?? -1) >= 0 ? [] : [whyWaiting(problem, bookings, request)],
    ),
    objective,
    bound,
    gap: bound.diagnostic === 0 ? 0 : (bound.diagnostic - objective.diagnostic) / bound.diagnostic,
    provedBy,
  };
}
