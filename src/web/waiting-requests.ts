import { takenPlace, waitingRequest, type TakenPlace, type WaitingRequest } from '../day/index.js';
import type { StoredBooking, StoredRequest } from '../store/index.js';
import type { PageDeps } from './deps.js';

/** Stored requests as filling and mending take them, each with its offers; other readers are served in between. */
export async function withOffers(
  { planner, ground }: PageDeps,
  requests: readonly StoredRequest[],
): Promise<readonly WaitingRequest[]> {
  const offered: WaitingRequest[] = [];
  for (const { body } of requests) {
    offered.push(waitingRequest(body, planner.offers(body), ground.library));
    await breath();
  }
  return offered;
}

/** Stored bookings as places already given away. */
export const takenPlaces = (
  { ground }: PageDeps,
  bookings: readonly StoredBooking[],
  requests: ReadonlyMap<string, StoredRequest>,
): readonly TakenPlace[] =>
  bookings.map((b) => takenPlace(b, requests.get(b.requestId)?.body.examId, ground.library));

/** Lets everything else that waits have its turn. */
export const breath = () => new Promise<void>((resolve) => setImmediate(resolve));
