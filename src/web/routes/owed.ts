import { Router } from 'express';
import { gradeWords } from '../../exams/index.js';
import { ProblemError } from '../../shared/index.js';
import type { StoredRequest } from '../../store/index.js';
import type { PageDeps } from '../deps.js';
import { siteDate } from '../site-time.js';
import { settle } from '../owed-settled.js';
import { takeTold, tell } from '../told.js';
import { whoIs } from '../who.js';

/** Answers owed: what a done exam left below diagnostic, until it is answered or a clinician signs it off. */
export function owedRoutes(deps: PageDeps): Router {
  const router = Router();
  const examName = (id: string) => deps.ground.library.exams.get(id)?.name ?? id;

  /** Every question a request asks; none named means all of its exam's. */
  const asksOf = ({ examId, questionIds }: StoredRequest['body']): ReadonlySet<string> =>
    new Set(
      questionIds.length > 0
        ? questionIds
        : deps.ground.library.exams.get(examId)?.questions.map((q) => q.id),
    );

  router.get('/owed', async (request, response) => {
    const items = await deps.store.owed.list();
    const requests = new Map((await deps.store.requests.list()).map((r) => [r.id, r]));
    const today = siteDate(deps.now(), deps.department.zone);
    const followUps = [...requests.values()]
      .filter((r) => r.status === 'waiting' || r.status === 'booked')
      .map((r) => ({ id: r.id, exam: examName(r.body.examId), asks: asksOf(r.body) }));
    response.render('owed', {
      title: 'Answers owed',
      open: items
        .filter((i) => i.state === 'owed' || i.state === 'follow-up booked')
        .map((i) => ({
          ...i,
          exam: examName(requests.get(i.requestId)?.body.examId ?? ''),
          words: gradeWords[i.grade],
          late: i.dueDate < today,
          couldAnswer: followUps
            .filter((f) => f.id !== i.requestId && f.asks.has(i.questionId))
            .map(({ id, exam }) => ({ id, exam })),
        })),
      closed: items
        .filter((i) => i.state === 'answered' || i.state === 'signed off')
        .map((i) => ({ ...i, words: gradeWords[i.grade] })),
      told: takeTold(request, response)?.text ?? '',
    });
  });

  router.post('/owed/:id/follow-up', async (request, response) => {
    const form = request.body as Record<string, string>;
    const owed = await deps.store.owed.get(String(request.params.id));
    const chosen = await deps.store.requests.get(form['request'] ?? '');
    if (chosen === undefined || owed === undefined || !asksOf(chosen.body).has(owed.questionId)) {
      throw new ProblemError({
        code: 'follow-up',
        thing: 'follow-up exam',
        value: chosen?.id ?? 'none chosen',
        limit: `only a request that asks "${owed?.questionName ?? 'this'}" can answer it`,
        wayOut: 'Go back and choose the request of the same patient.',
      });
    }
    const outcome = await deps.store.owed.bookFollowUp(
      owed.id,
      Number(form['version']),
      chosen.id,
      whoIs(request),
      deps.now(),
    );
    settle(outcome);
    tell(response, 'told', 'Follow-up noted. The answer stays owed until it is given.');
    response.redirect(303, '/owed');
  });

  router.post('/owed/:id/sign-off', async (request, response) => {
    const form = request.body as Record<string, string>;
    const signedBy = (form['signed_by'] ?? '').trim();
    const reason = (form['reason'] ?? '').trim();
    if (signedBy === '' || reason === '') {
      throw new ProblemError({
        code: 'sign-off',
        thing: 'sign-off',
        value: signedBy === '' ? 'no clinician named' : 'no reason given',
        limit: 'a clinician signs with name and reason',
        wayOut: 'Go back and fill in both.',
      });
    }
    const outcome = await deps.store.owed.signOff(
      String(request.params.id),
      Number(form['version']),
      { signedBy, reason },
      whoIs(request),
      deps.now(),
    );
    settle(outcome);
    tell(response, 'told', 'Signed off.');
    response.redirect(303, '/owed');
  });

  return router;
}
