import {
  fill,
  repeatableStream,
  type FillProblem,
  type FillProgress,
  type FillProposal,
} from '../day/index.js';
import type { PageDeps } from './deps.js';
import { pastPlaces } from './past-places.js';
import { breath, takenPlaces, withOffers } from './waiting-requests.js';

/** Search budget of a proposal made while somebody waits for the page. */
const quickIterations = 800;

/**
 * Everybody who waits, and what stands booked on some days.
 * @param onOffered called after each request's offers are worked out, with how many and of how many
 */
export async function fillProblem(
  deps: PageDeps,
  days: readonly string[],
  onOffered: (done: number, of: number) => void = () => undefined,
): Promise<FillProblem> {
  const { store, department } = deps;
  const all = await store.requests.list();
  const bookings = await store.bookings.listBetween(days[0]!, days[days.length - 1]!);
  const stored = all.filter((r) => r.status === 'waiting');
  const waiting = [];
  for (const request of stored) {
    waiting.push(...(await withOffers(deps, [request])));
    onOffered(waiting.length, stored.length);
  }
  return {
    department: { ...department, days },
    taken: [
      ...pastPlaces(deps, days),
      ...takenPlaces(deps, bookings, new Map(all.map((r) => [r.id, r]))),
    ],
    waiting,
  };
}

/** A small search that runs to its end; other readers are served between its steps. */
export async function proposeQuickly(
  deps: PageDeps,
  days: readonly string[],
): Promise<FillProposal> {
  const run = slicedFill(await fillProblem(deps, days), quickIterations);
  let step = run.next();
  while (step.done !== true) {
    await breath();
    step = run.next();
  }
  return step.value;
}

/** Iterations between two breaths: some milliseconds for a department's week. */
const sliceIterations = 20;

/** The search in slices short enough for others to be served in between; the same budget gives the same proposal. */
export const slicedFill = (
  problem: FillProblem,
  iterations: number,
): Generator<FillProgress, FillProposal> =>
  fill(problem, { iterations, random: repeatableStream(1), reportEvery: sliceIterations });

/** Iterations of the trials that a machine's speed is taken from: the first warms it up. */
const trialIterations = [150, 300];
const leastIterations = 300;
const mostIterations = 200_000;

/**
 * How many iterations this machine does in about so many seconds for this problem, two digits: written beside the proposal,
 * the number repeats it.
 *
 * @param clockMs a clock that runs, milliseconds
 */
export async function iterationsIn(
  problem: FillProblem,
  seconds: number,
  clockMs: () => number,
): Promise<number> {
  let eachMs = 1;
  for (const iterations of trialIterations) {
    const run = fill(problem, {
      iterations,
      ...{ random: repeatableStream(2), reportEvery: sliceIterations },
      ...{ boundRounds: 10, exactNodes: 0 },
    });
    let spentMs = 0;
    // The first step is the bound's.
    let step = run.next();
    while (step.done !== true) {
      await breath();
      const began = clockMs();
      step = run.next();
      spentMs += clockMs() - began;
    }
    eachMs = Math.max(0.005, spentMs / iterations);
  }
  const wanted = Math.min(mostIterations, Math.max(leastIterations, (1000 * seconds) / eachMs));
  const unit = 10 ** (Math.floor(Math.log10(wanted)) - 1);
  return unit * Math.floor(wanted / unit);
}
