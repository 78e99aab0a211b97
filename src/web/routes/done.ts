import { Router, type Response } from 'express';
import { grades, gradeWords, type Grade } from '../../exams/index.js';
import { ProblemError } from '../../shared/index.js';
import type { StoredBooking } from '../../store/index.js';
import { achievedOf } from '../achieved-of.js';
import { consoleExamOf } from '../console-exam.js';
import type { PageDeps } from '../deps.js';
import { settle } from '../owed-settled.js';
import { dayFrom } from '../site-time.js';
import { tell } from '../told.js';
import { consolePage } from '../view-models/console-page.js';
import { whoIs } from '../who.js';

/** An exam is over: what it answered goes on record, and what it left open on the list of answers owed. */
export function doneRoutes(deps: PageDeps): Router {
  const router = Router();
  const { planner } = deps;
  const examName = (id: string) => deps.ground.library.exams.get(id)?.name ?? id;

  /**
   * The exam is done: what each question got. Offered is what the taps at the scanner showed, or the planned grades where
   * nothing was tapped; lower or higher ones can be said.
   */
  router.get('/bookings/:id/done', async (request, response, next) => {
    const booking = await deps.store.bookings.get(String(request.params.id));
    const stored =
      booking === undefined ? undefined : await deps.store.requests.get(booking.requestId);
    if (booking === undefined || stored === undefined) return next();
    if (alreadyDone(booking, response)) return;
    const scanner = deps.department.scanners.find((s) => s.id === booking.scannerId);
    const outcome =
      scanner === undefined
        ? undefined
        : await planner.plan(stored.body, scanner, booking.slotMin * 60);
    const events = await deps.store.consoleLog.list(booking.id);
    const tapped =
      scanner === undefined || events.length === 0
        ? undefined
        : consolePage(consoleExamOf(deps, stored.body, scanner), events, booking.slotMin * 60, 0)
            .planned.answered;
    const gradeOf = new Map(tapped?.map((a) => [a.questionId, a.grade]));
    response.render('done', {
      title: `${stored.id} is done`,
      booking,
      stored,
      exam: examName(stored.body.examId),
      grades: grades.map((g) => ({ grade: g, words: gradeWords[g] })),
      chosen:
        tapped === undefined
          ? 'The planned grades are chosen.'
          : 'What the taps at the scanner showed is chosen.',
      answers: (outcome?.kind === 'planned' ? outcome.plan.answers : []).map((a) => ({
        questionId: a.questionId,
        name: a.name,
        asks: a.asks,
        grade: gradeOf.get(a.questionId) ?? a.grade,
      })),
    });
  });

  router.post('/bookings/:id/done', async (request, response, next) => {
    const booking = await deps.store.bookings.get(String(request.params.id));
    const stored =
      booking === undefined ? undefined : await deps.store.requests.get(booking.requestId);
    const exam =
      stored === undefined ? undefined : deps.ground.library.exams.get(stored.body.examId);
    if (booking === undefined || stored === undefined || exam === undefined) return next();
    if (alreadyDone(booking, response)) return;
    const form = request.body as Record<string, string>;
    const asked = exam.questions.filter(
      (q) => stored.body.questionIds.length === 0 || stored.body.questionIds.includes(q.id),
    );
    const days = deps.ground.library.policy.owed.dueDays[stored.body.priority].value;
    const dueDate = dayFrom(booking.date, days);
    const outcome = await deps.store.owed.recordDone(
      {
        bookingId: booking.id,
        version: Number(form['version'] ?? booking.version),
        dueDate,
        answers: asked.map((q) => ({
          questionId: q.id,
          name: q.name,
          grade: readGrade(form[`grade_${q.id}`], q.name),
        })),
        achieved: await achievedOf(deps, booking, stored),
      },
      whoIs(request),
      deps.now(),
    );
    settle(outcome);
    tell(response, 'told', `${stored.id} is done; what it left open stands below.`);
    response.redirect(303, '/owed');
  });

  return router;
}

/** Recording is sent twice by an impatient finger or a page gone back to: the second changes nothing, and is told so. */
function alreadyDone({ status, requestId }: StoredBooking, response: Response): boolean {
  if (status !== 'fulfilled') return false;
  tell(response, 'told', `${requestId} is recorded as done already; this changed nothing.`);
  response.redirect(303, '/owed');
  return true;
}

function readGrade(text: string | undefined, question: string): Grade {
  const grade = grades.find((g) => g === text);
  if (grade === undefined) {
    throw new ProblemError({
      code: 'grade',
      thing: `grade of "${question}"`,
      value: `"${text ?? ''}"`,
      limit: `one of: ${grades.join(', ')}`,
      wayOut: 'Go back and choose one.',
    });
  }
  return grade;
}
