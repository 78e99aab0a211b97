import { fill, repeatableStream, type FillProblem, type FillProposal } from '../day/index.js';
import type { StoredBooking, StoredRequest } from '../store/index.js';
import type { PageDeps } from './deps.js';
import { breath, takenPlaces, withOffers } from './waiting-requests.js';

/** Search budget of a proposal made while somebody waits for the page. */
const iterations = 800;

/**
 * A proposal for the waiting requests on some days, around what is booked. Other readers are served between
 * the steps of the search.
 */
export async function proposeFill(
  deps: PageDeps,
  days: readonly string[],
  waiting: readonly StoredRequest[],
  bookings: readonly StoredBooking[],
  requests: ReadonlyMap<string, StoredRequest>,
): Promise<{ readonly proposal: FillProposal; readonly problem: FillProblem }> {
  const problem: FillProblem = {
    department: { ...deps.department, days },
    taken: takenPlaces(deps, bookings, requests),
    waiting: await withOffers(deps, waiting),
  };
  const run = fill(problem, { iterations, random: repeatableStream(1), reportEvery: 25 });
  let step = run.next();
  while (step.done !== true) {
    await breath();
    step = run.next();
  }
  return { proposal: step.value, problem };
}
