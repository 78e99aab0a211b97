import { startIn } from './fill-free.js';
import { dateRefusal, priorityWorth } from './fill-problem.js';
import { freeGaps } from './gaps.js';
import type { MendOutcome, MendProblem, Repair } from './mend-problem.js';
import type { Booking } from './scanners.js';

/** A place that falls free moves nobody; those waiting who could come are named, most pressing first. */
export function noShow(problem: MendProblem, requestId: string): MendOutcome {
  const nothing: Repair = {
    moves: [],
    withoutPlace: [],
    waitOnSite: [],
    stuck: [],
    peopleMoved: 0,
    shiftMin: 0,
    fewest: true,
    shorterSlots: false,
  };
  const gone = problem.visits.find((v) => v.requestId === requestId);
  const scanner = problem.department.scanners.find((s) => s.id === gone?.scannerId);
  if (gone === undefined || scanner === undefined) return { proposals: [nothing] };
  const others = problem.visits.filter(
    (v) => v !== gone && v.scannerId === gone.scannerId && v.date === gone.date,
  );
  const { movableFrom, now } = problem;
  const soonest =
    movableFrom.date > now.date ||
    (movableFrom.date === now.date && movableFrom.minute > now.minute)
      ? movableFrom
      : now;
  const gap = freeGaps(scanner, others)
    .map((g) => ({
      ...g,
      fromMin: soonest.date === gone.date ? Math.max(g.fromMin, soonest.minute) : g.fromMin,
    }))
    .find((g) => g.fromMin < gone.startMin + gone.slotMin && gone.startMin < g.toMin);
  const couldCome =
    gap === undefined || soonest.date > gone.date
      ? []
      : (problem.waiting ?? [])
          .filter((request) => dateRefusal(request, gone.date) === undefined)
          .filter((request) =>
            (request.offers.get(scanner.id) ?? []).some(
              (o) => startIn(gap, request, o.slotMin) !== undefined,
            ),
          )
          .sort((a, b) => priorityWorth[b.priority] - priorityWorth[a.priority])
          .map((request) => request.id);
  return { proposals: [nothing], freed: { place: bare(gone), couldCome } };
}

/** A place alone, without what else is known of a visit. */
export const bare = ({ requestId, scannerId, date, startMin, slotMin }: Booking): Booking => ({
  requestId,
  scannerId,
  date,
  startMin,
  slotMin,
});
