import type { SiteLibrary } from '../exams/index.js';
import type { ExamRequest } from '../planning/index.js';
import type { TakenPlace, WaitingRequest } from './fill-problem.js';
import type { RequestOffers } from './offers.js';
import type { Booking } from './scanners.js';

/** A request as filling and mending take it, with what each scanner can offer it. */
export function waitingRequest(
  { id, priority, dueDate, canCome, examId }: ExamRequest,
  offered: RequestOffers,
  library: SiteLibrary,
): WaitingRequest {
  return {
    ...{ id, priority, canCome, ...(dueDate === undefined ? {} : { dueDate }) },
    coil: library.exams.get(examId)?.coil ?? 'unknown',
    ...offered,
  };
}

/** A booking as filling and mending take it. */
export function takenPlace(
  { requestId, scannerId, date, startMin, slotMin }: Booking,
  examId: string | undefined,
  library: SiteLibrary,
): TakenPlace {
  const coil = library.exams.get(examId ?? '')?.coil;
  return {
    ...{ requestId, scannerId, date, startMin, slotMin },
    ...(coil === undefined ? {} : { coil }),
  };
}
