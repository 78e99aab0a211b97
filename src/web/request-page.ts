import type { Response } from 'express';
import type { Scanner } from '../day/index.js';
import { bestScanner, type ExamRequest } from '../planning/index.js';
import type { Problem } from '../shared/index.js';
import type { PageDeps } from './deps.js';
import { planSheet } from './view-models/plan-sheet.js';
import { inFormWords, readForm, requestForm, type FormValues } from './view-models/request-form.js';

/** Whether the form takes a new request or changes one. */
export type FormMode =
  | { readonly kind: 'new' }
  | { readonly kind: 'edit'; readonly id: string; readonly version: number };

/** The request form as a page, with the plan for its answers beside it. */
export function requestPage(deps: PageDeps) {
  const { planner } = deps;
  const { library } = deps.ground;

  async function look(values: FormValues) {
    const exam = library.exams.get(values['exam'] ?? '');
    if (exam === undefined) return { exam: undefined, problems: [] as readonly Problem[] };
    const read = readForm({ ...values, request_id: values['request_id'] || 'new' });
    const chosenQuestions = (values['questions'] ?? '').split(';');
    if (read.kind === 'refused')
      return { exam, chosenQuestions, problems: inFormWords(read.problems) };
    const asked: ExamRequest = {
      ...read.value.request,
      questionIds: read.value.request.questionIds.filter((q) =>
        exam.questions.some((known) => known.id === q),
      ),
    };
    const scanner = scannerFor(asked, values['scanner']);
    if (scanner === undefined) return { exam, chosenQuestions, problems: [] };
    const outcome = await planner.plan(asked, scanner);
    if (outcome.kind === 'refused')
      return { exam, chosenQuestions, problems: inFormWords(outcome.problems) };
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

  async function show(
    response: Response,
    values: FormValues,
    problems: readonly Problem[],
    mode: FormMode,
  ) {
    response.status(problems.length > 0 ? 422 : 200).render('request-form', {
      title: mode.kind === 'new' ? 'Take a request' : `Change ${mode.id}`,
      form: requestForm(values, library, problems),
      look: await look(values),
      mode,
      scanners: deps.department.scanners,
    });
  }

  return { look, show };
}
