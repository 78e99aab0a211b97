import { Router, type Request, type Response } from 'express';
import type { Scanner } from '../../day/index.js';
import { bestScanner, type ExamRequest } from '../../planning/index.js';
import type { Problem } from '../../shared/index.js';
import type { StoredRequest } from '../../store/index.js';
import type { PageDeps } from '../deps.js';
import { summaryOf } from '../planner.js';
import { planSheet } from '../view-models/plan-sheet.js';
import {
  formValues,
  readForm,
  requestForm,
  valuesOf,
  type FormValues,
} from '../view-models/request-form.js';
import { requestRows } from '../view-models/request-rows.js';
import { whoIs } from '../who.js';

/** Requests: the list, taking one in with its plan beside the form, changing one. */
export function requestRoutes(deps: PageDeps): Router {
  const router = Router();
  const { planner } = deps;
  const { library } = deps.ground;

  router.get('/requests', async (request, response) => {
    const status =
      typeof request.query['status'] === 'string' ? request.query['status'] : 'waiting';
    const rows = requestRows(
      await deps.store.requests.list(),
      await deps.store.bookings.listBetween('0000-01-01', '9999-12-31'),
      library,
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
    await showForm(response, values, [], { kind: 'new' });
  });

  router.post('/requests', async (request, response) => {
    const values = formValues(request.body as Record<string, unknown>);
    const read = readForm(values);
    if (values['look'] !== undefined || read.kind === 'refused') {
      await showForm(
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
      return void (await showForm(response, values, [unknownExam], { kind: 'new' }));
    const added = await deps.store.requests.add(body, whoIs(request), deps.now());
    if (added.kind === 'exists') {
      const problem: Problem = {
        code: 'request-duplicate',
        thing: 'the form, field request_id',
        value: `"${body.id}"`,
        limit: 'already used by another request',
        wayOut: 'Give it the next free number.',
      };
      await showForm(response, values, [problem], { kind: 'new' });
      return;
    }
    response.redirect(303, `/requests/${encodeURIComponent(body.id)}`);
  });

  /** What the open form shows beside itself: the plan for the answers so far, and the exam's questions. */
  router.post('/requests/look', async (request, response) => {
    const values = formValues(request.body as Record<string, unknown>);
    const look = await lookAt(values);
    response.set('Cache-Control', 'no-store').render('parts/look', { look });
  });

  router.get('/requests/:id/edit', async (request, response, next) => {
    const stored = await deps.store.requests.get(String(request.params.id));
    if (stored === undefined) return next();
    await showForm(response, valuesOf(stored.body), [], {
      kind: 'edit',
      id: stored.id,
      version: stored.version,
    });
  });

  router.post('/requests/:id/edit', async (request, response, next) => {
    const stored = await deps.store.requests.get(String(request.params.id));
    if (stored === undefined) return next();
    const values: FormValues = {
      ...formValues(request.body as Record<string, unknown>),
      request_id: stored.id,
    };
    const mode = { kind: 'edit', id: stored.id, version: Number(values['version']) } as const;
    const read = readForm(values);
    if (values['look'] !== undefined || read.kind === 'refused') {
      await showForm(
        response,
        values,
        read.kind === 'refused' && values['look'] === undefined ? read.problems : [],
        mode,
      );
      return;
    }
    const changed = await deps.store.requests.change(
      stored.id,
      mode.version,
      { body: read.value.request },
      whoIs(request),
      deps.now(),
    );
    if (changed.kind !== 'changed') {
      await showForm(response, values, [notSaved(changed)], {
        kind: 'edit',
        id: stored.id,
        version: stored.version,
      });
      return;
    }
    await planAgain(changed.request, request);
    response.redirect(303, `/requests/${encodeURIComponent(stored.id)}`);
  });

  /** A booked request that was changed keeps its place; its plan is made anew, so that the board shows what it gets now. */
  async function planAgain(stored: StoredRequest, request: Request) {
    const booking = await deps.store.bookings.ofRequest(stored.id);
    const scanner = deps.department.scanners.find((s) => s.id === booking?.scannerId);
    if (booking === undefined || scanner === undefined || booking.plan !== null) return;
    const outcome = await planner.plan(stored.body, scanner, booking.slotMin * 60);
    if (outcome.kind === 'refused') return;
    await deps.store.bookings.keepPlan(
      booking.id,
      booking.version,
      summaryOf(outcome.plan),
      whoIs(request),
      deps.now(),
    );
  }

  async function lookAt(values: FormValues) {
    const exam = library.exams.get(values['exam'] ?? '');
    if (exam === undefined) return { exam: undefined, problems: [] as readonly Problem[] };
    const read = readForm({ ...values, request_id: values['request_id'] || 'new' });
    const chosenQuestions = (values['questions'] ?? '').split(';');
    if (read.kind === 'refused') return { exam, chosenQuestions, problems: read.problems };
    const asked: ExamRequest = {
      ...read.value.request,
      questionIds: read.value.request.questionIds.filter((q) =>
        exam.questions.some((known) => known.id === q),
      ),
    };
    const scanner = scannerFor(asked, values['scanner']);
    if (scanner === undefined) return { exam, chosenQuestions, problems: [] };
    const outcome = await planner.plan(asked, scanner);
    if (outcome.kind === 'refused') return { exam, chosenQuestions, problems: outcome.problems };
    return {
      exam,
      chosenQuestions,
      problems: [],
      sheet: planSheet(outcome.plan, { linkTo: undefined }),
    };
  }

  function scannerFor(asked: ExamRequest, wanted: string | undefined): Scanner | undefined {
    return (
      deps.department.scanners.find((s) => s.id === wanted) ??
      bestScanner(asked, deps.department.scanners, deps.ground)
    );
  }

  async function showForm(
    response: Response,
    values: FormValues,
    problems: readonly Problem[],
    mode:
      | { readonly kind: 'new' }
      | { readonly kind: 'edit'; readonly id: string; readonly version: number },
  ) {
    response.status(problems.length > 0 ? 422 : 200).render('request-form', {
      title: mode.kind === 'new' ? 'Take a request' : `Change ${mode.id}`,
      form: requestForm(values, library, problems),
      look: await lookAt(values),
      mode,
      scanners: deps.department.scanners,
    });
  }

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

/** Why a change was not saved, with the answers still in the form. */
function notSaved(outcome: { readonly kind: string; readonly why: string }): Problem {
  return outcome.kind === 'stale'
    ? {
        code: 'stale',
        thing: 'the form',
        value: 'somebody else changed this request meanwhile',
        limit: 'only the newest version can be changed',
        wayOut:
          'Your answers are still here. Open the request in another tab, compare, and save again.',
      }
    : {
        code: 'refused',
        thing: 'the form',
        value: outcome.why,
        limit: 'nothing was changed',
        wayOut: 'Your answers are still here. Open the day board to see what stands in the way.',
      };
}
