import type { ExamRequest } from '../../planning/index.js';
import { ProblemError } from '../../shared/index.js';
import { usualScenario, type SourcedScenario } from '../../throughput/index.js';
import type { PageDeps } from '../deps.js';
import { breath } from '../waiting-requests.js';

/** What the month is simulated from: the requests on record and the department as it is. */
export async function monthRecords(
  deps: Pick<PageDeps, 'store' | 'department'>,
): Promise<{ readonly requests: readonly ExamRequest[]; readonly usual: SourcedScenario }> {
  const requests = (await deps.store.requests.list()).map((r) => r.body);
  // Thousands of requests take a while to read: others come before they are gone through.
  await breath();
  const bookings = await deps.store.bookings.listBetween('0000-01-01', '9999-12-31', {
    withCancelled: true,
  });
  const noShows = bookings.filter((b) => b.status === 'noshow').length;
  const kept = bookings.filter((b) => b.status === 'fulfilled' || b.status === 'noshow').length;
  return { requests, usual: usualScenario(deps.department, requests, { bookings: kept, noShows }) };
}

/** @throws ProblemError when there is nothing to take the mix from */
export function demandRecords(requests: readonly ExamRequest[]): void {
  if (requests.length > 0) return;
  throw new ProblemError({
    code: 'month-no-records',
    thing: 'requests on record',
    value: 'none',
    limit: 'the mix of exams and patients is taken from them',
    wayOut: 'Take some requests first, as they come on a usual day.',
  });
}
