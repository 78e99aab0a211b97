import { Router } from 'express';
import type { ExamRequest } from '../../planning/index.js';
import type { Problem } from '../../shared/index.js';
import type { PageDeps } from '../deps.js';
import { recordedAnswers } from '../recorded-answers.js';
import { requestPage } from '../request-page.js';
import { formValues, readForm, type FormValues } from '../view-models/request-form.js';
import { requestRows } from '../view-models/request-rows.js';
import { whoIs } from '../who.js';

/** Requests: the list, and taking one in with its plan beside the form. */
export function requestRoutes(deps: PageDeps): Router {
  const router = Router();
  const page = requestPage(deps);
  const { library } = deps.ground;

  router.get('/requests', async (request, response) => {
    const status =
      typeof request.query['status'] === 'string' ? request.query['status'] : 'waiting';
    const all = await deps.store.requests.list();
    const rows = requestRows(
      all,
      await deps.store.bookings.listBetween('0000-01-01', '9999-12-31'),
      library,
      await recordedAnswers(deps, all),
    );
    response.render('requests', {
      title: 'Requests',
      status,
      rows: rows.filter((r) => status === 'all' || r.status === status),
      counts: Object.fromEntries(
        ['waiting', 'booked', 'done', 'cancelled'].map((s) => [
          s,
          rows.filter((r) => r.status === s).length,
        ]),
      ),
    });
  });

  router.get('/requests/new', async (request, response) => {
    const exam = typeof request.query['exam'] === 'string' ? request.query['exam'] : '';
    const values: FormValues = { ...blank, exam, request_id: await nextId(deps) };
    await page.show(response, values, [], { kind: 'new' });
  });

  router.post('/requests', async (request, response) => {
    const values = formValues(request.body as Record<string, unknown>);
    const read = readForm(values);
    if (values['look'] !== undefined || read.kind === 'refused') {
      await page.show(
        response,
        values,
        read.kind === 'refused' && values['look'] === undefined ? read.problems : [],
        { kind: 'new' },
      );
      return;
    }
    const body = read.value.request;
    const unknownExam = examProblem(body, library.exams.has(body.examId));
    if (unknownExam !== undefined)
      return void (await page.show(response, values, [unknownExam], { kind: 'new' }));
    const added = await deps.store.requests.add(body, whoIs(request), deps.now());
    if (added.kind === 'exists') {
      const problem: Problem = {
        code: 'request-duplicate',
        thing: 'the form, field request_id',
        value: `"${body.id}"`,
        limit: 'already used by another request',
        wayOut: 'Give it the next free number.',
      };
      await page.show(response, values, [problem], { kind: 'new' });
      return;
    }
    response.redirect(303, `/requests/${encodeURIComponent(body.id)}`);
  });

  /** What the open form shows beside itself: the plan for the answers so far, and the exam's questions. */
  router.post('/requests/look', async (request, response) => {
    const values = formValues(request.body as Record<string, unknown>);
    const look = await page.look(values);
    response.set('Cache-Control', 'no-store').render('parts/look', { look });
  });

  return router;
}

/** Answers a fresh form starts with: nothing asked yet. */
const blank: FormValues = {
  priority: 'routine',
  patient_class: 'outpatient',
  still_for: 'not asked',
  hold_breath_for: 'not asked',
  stay_for: 'not asked',
  said_by: 'patient',
  follows_instructions: 'not asked',
  contrast: 'not needed',
  safety_screening: 'not yet',
  transport: 'walking',
  escort: 'no',
  slot: '30 min',
  can_come_part: 'any',
};

/** The next free number after the highest "R-" number, as a proposal the clerk can change. */
async function nextId(deps: PageDeps): Promise<string> {
  const used = (await deps.store.requests.list()).map((r) =>
    Number(/^R-(\d+)$/.exec(r.id)?.[1] ?? 0),
  );
  return `R-${Math.max(100, ...used) + 1}`;
}

function examProblem(body: ExamRequest, known: boolean): Problem | undefined {
  if (known) return undefined;
  return {
    code: 'request-exam',
    thing: 'the form, field exam',
    value: `"${body.examId}"`,
    limit: 'an exam of the site library',
    wayOut: 'Choose an exam from the list.',
  };
}
