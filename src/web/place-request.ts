import type { Scanner } from '../day/index.js';
import { ProblemError } from '../shared/index.js';
import type { PlacingOutcome, StoredRequest } from '../store/index.js';
import { refuseOutsideHours } from './board-fields.js';
import type { PageDeps } from './deps.js';
import { summaryOf } from './planner.js';

/** A place asked for on the board. */
export interface WantedPlace {
  readonly scanner: Scanner;
  /** ISO date. */
  readonly date: string;
  readonly startMin: number;
  readonly slotMin: number;
}

/**
 * Plans a request for a place and asks the store for it; the store alone decides who gets it.
 * @throws ProblemError for closed hours, a break, or an exam the scanner cannot take
 */
export async function placeRequest(
  deps: PageDeps,
  stored: StoredRequest,
  { scanner, date, startMin, slotMin }: WantedPlace,
  who: string,
): Promise<PlacingOutcome> {
  refuseOutsideHours(stored.id, scanner, date, startMin, slotMin, deps);
  const outcome = await deps.planner.plan(stored.body, scanner, slotMin * 60);
  if (outcome.kind === 'refused') throw new ProblemError(outcome.problems[0]!);
  const plan = summaryOf(outcome.plan);
  return deps.store.bookings.place(
    { requestId: stored.id, scannerId: scanner.id, date, startMin, slotMin, teams: [], plan },
    who,
    deps.now(),
  );
}
