import { clock } from '../../day/index.js';
import { rankOf, type Grade, type SiteLibrary } from '../../exams/index.js';
import type { StoredBooking, StoredRequest } from '../../store/index.js';
import { planSummary, type PlanSummary } from '../planner.js';

/** One line of the list of requests. */
export interface RequestRow {
  readonly id: string;
  readonly exam: string;
  readonly questions: string;
  readonly priority: string;
  readonly dueDate: string;
  readonly status: string;
  readonly slotMin: number;
  readonly place?: { readonly date: string; readonly words: string };
  readonly worst?: { readonly grade: Grade; readonly words: string };
}

export function requestRows(
  requests: readonly StoredRequest[],
  bookings: readonly StoredBooking[],
  library: SiteLibrary,
  recorded: ReadonlyMap<string, PlanSummary['answers']>,
): readonly RequestRow[] {
  const byRequest = new Map(bookings.map((b) => [b.requestId, b]));
  return requests.map(({ id, status, body }) => {
    const exam = library.exams.get(body.examId);
    const asked =
      exam?.questions.filter(
        (q) => body.questionIds.length === 0 || body.questionIds.includes(q.id),
      ) ?? [];
    const booking = byRequest.get(id);
    const summary = planSummary.safeParse(booking?.plan);
    const planned = summary.success ? summary.data.answers : [];
    const answers = status === 'done' ? (recorded.get(id) ?? []) : planned;
    const worst = [...answers].sort((a, b) => rankOf(a.grade) - rankOf(b.grade))[0];
    return {
      id,
      exam: exam?.name ?? body.examId,
      questions: body.questionIds.length === 0 ? 'all' : asked.map((q) => q.name).join(', '),
      priority: body.priority,
      dueDate: body.dueDate ?? '',
      status,
      slotMin: Math.ceil(body.slotS / 60),
      ...(booking === undefined
        ? {}
        : {
            place: {
              date: booking.date,
              words: `${booking.date} ${clock(booking.startMin)}, ${booking.scannerId}`,
            },
          }),
      ...(worst === undefined ? {} : { worst: { grade: worst.grade, words: worst.words } }),
    };
  });
}
