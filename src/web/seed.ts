import type { BookedRequest } from '../interchange/index.js';
import { planExam } from '../planning/index.js';
import type { WebDeps } from './deps.js';
import { summaryOf } from './planner.js';

/** Puts a department's first requests and bookings into a store, each booking with its plan. Doing it twice changes nothing. */
export async function seedDepartment(
  booked: readonly BookedRequest[],
  deps: Pick<WebDeps, 'store' | 'ground' | 'department' | 'solver' | 'now'>,
): Promise<number> {
  const bookings = [];
  for (const { request, booking } of booked) {
    const scanner = deps.department.scanners.find((s) => s.id === booking?.scannerId);
    if (booking === undefined || scanner === undefined) continue;
    const outcome = await planExam(request, scanner, deps.ground, { solver: deps.solver });
    bookings.push({
      ...booking,
      teams: [],
      ...(outcome.kind === 'planned' ? { plan: summaryOf(outcome.plan) } : {}),
    });
  }
  await deps.store.seed(
    { requests: booked.map((b) => b.request), bookings },
    'first start',
    deps.now(),
  );
  return bookings.length;
}
