import {
  fill,
  offersFor,
  repeatableStream,
  type FillProblem,
  type FillProposal,
  type WaitingRequest,
} from '../day/index.js';
import { chooseCurve } from '../planning/index.js';
import type { StoredBooking, StoredRequest } from '../store/index.js';
import type { WebDeps } from './deps.js';

/** Search budget of a proposal made while somebody waits for the page. */
const iterations = 800;

/**
 * A proposal for the waiting requests on some days, around what is booked. Other readers are served between
 * the steps of the search.
 */
export async function proposeFill(
  deps: Pick<WebDeps, 'department' | 'ground'>,
  days: readonly string[],
  waiting: readonly StoredRequest[],
  bookings: readonly StoredBooking[],
  requests: ReadonlyMap<string, StoredRequest>,
): Promise<{ readonly proposal: FillProposal; readonly problem: FillProblem }> {
  const coilOf = (examId: string | undefined) => deps.ground.library.exams.get(examId ?? '')?.coil;
  const offered: WaitingRequest[] = [];
  for (const { body } of waiting) {
    const { id, priority, dueDate, canCome, examId } = body;
    offered.push({
      ...{ id, priority, canCome, ...(dueDate === undefined ? {} : { dueDate }) },
      coil: coilOf(examId) ?? 'unknown',
      ...offersFor(body, deps.department.scanners, deps.ground, chooseCurve),
    });
    await breath();
  }
  const problem: FillProblem = {
    department: { ...deps.department, days },
    taken: bookings.map((b) => {
      const coil = coilOf(requests.get(b.requestId)?.body.examId);
      return {
        requestId: b.requestId,
        scannerId: b.scannerId,
        date: b.date,
        startMin: b.startMin,
        slotMin: b.slotMin,
        ...(coil === undefined ? {} : { coil }),
      };
    }),
    waiting: offered,
  };
  const run = fill(problem, { iterations, random: repeatableStream(1), reportEvery: 25 });
  let step = run.next();
  while (step.done !== true) {
    await breath();
    step = run.next();
  }
  return { proposal: step.value, problem };
}

/** Lets everything else that waits have its turn. */
const breath = () => new Promise<void>((resolve) => setImmediate(resolve));
