import { DateTime } from 'luxon';
import { bookingConflicts, type Department, type Scanner } from '../day/index.js';
import type { BookedRequest } from '../interchange/index.js';
import {
  bestScanner,
  planExam,
  type ChoiceSolver,
  type Plan,
  type PlanningGround,
} from '../planning/index.js';
import type { Problem } from '../shared/index.js';

export interface PlannedRequest {
  readonly booked: BookedRequest;
  readonly plan: Plan;
}

export interface PlannedList {
  readonly planned: readonly PlannedRequest[];
  readonly problems: readonly Problem[];
}

/** Plans every request on its booked scanner, or on the one that gets it the best answers. */
export async function planRequests(
  requests: readonly BookedRequest[],
  department: Department,
  ground: PlanningGround,
  solver: ChoiceSolver,
  progress: (done: number, of: number) => void = () => {},
): Promise<PlannedList> {
  const problems: Problem[] = [
    ...bookingConflicts(
      requests.flatMap((r) => r.booking ?? []),
      department,
    ),
  ];
  const planned: PlannedRequest[] = [];
  for (const [index, booked] of requests.entries()) {
    progress(index, requests.length);
    const scanner = scannerFor(booked, department, ground);
    if (scanner === undefined) {
      if (booked.booking === undefined) problems.push(noScanner(booked, department));
      continue;
    }
    const outcome = await planExam(booked.request, scanner, ground, {
      solver,
      otherScanners: department.scanners,
    });
    if (outcome.kind === 'planned') planned.push({ booked, plan: outcome.plan });
    else problems.push(...outcome.problems);
  }
  progress(requests.length, requests.length);
  return { planned, problems };
}

function scannerFor(
  { booking, request }: BookedRequest,
  department: Department,
  ground: PlanningGround,
): Scanner | undefined {
  if (booking !== undefined) return department.scanners.find((s) => s.id === booking.scannerId);
  return bestScanner(request, department.scanners, ground) ?? department.scanners[0];
}

const noScanner = ({ request }: BookedRequest, department: Department): Problem => ({
  code: 'request-scanner',
  thing: `request ${request.id}, field scanner`,
  value: 'no scanner can take it',
  limit: `scanners: ${department.scanners.map((s) => s.id).join(', ')}`,
  wayOut: 'Add a scanner to the department.',
});

/** "Tue 8 Dec 09:30", or nothing for a request not placed yet. */
export function whenWords({ booking }: BookedRequest): string {
  if (booking === undefined) return '';
  const day = DateTime.fromISO(booking.date, { zone: 'utc' }).setLocale('en-GB');
  const at = day.plus({ minutes: booking.startMin });
  return at.toFormat('ccc d LLL HH:mm');
}
