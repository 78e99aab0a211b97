import { Router, type Request, type Response } from 'express';
import type { Scenario } from '../../throughput/index.js';
import type { StoredScenario } from '../../store/index.js';
import { gone } from '../board-fields.js';
import type { PageDeps } from '../deps.js';
import { readScenarioForm } from '../month/read-scenario-form.js';
import { monthRecords } from '../month/records.js';
import { tell } from '../told.js';
import type { ScenarioValues } from '../view-models/scenario-fields.js';
import { scenarioForm, scenarioValues } from '../view-models/scenario-form.js';
import { whoIs } from '../who.js';

/** One scenario: described, copied, changed, taken out. */
export function monthScenarioRoutes(deps: PageDeps): Router {
  const router = Router();
  const { store, department, ground } = deps;
  const own = department.scanners;
  const examIds = [...ground.library.exams.keys()];

  router.get('/month/new', async (request, response) => {
    const from = typeof request.query['from'] === 'string' ? request.query['from'] : '';
    const stored = from === '' ? undefined : await store.scenarios.get(from);
    const { usual } = await monthRecords(deps);
    const start: Scenario =
      stored === undefined
        ? { ...usual.scenario, name: 'As it is' }
        : { ...stored.scenario, name: `Copy of ${stored.scenario.name}`.slice(0, 80) };
    await show(response, scenarioValues(start, own), undefined, []);
  });

  router.post('/month/scenarios', async (request, response) => {
    const values = formText(request);
    const { scenario, problems } = readScenarioForm(values, own, examIds);
    if (problems.length > 0) return show(response, values, undefined, problems);
    const added = await store.scenarios.add(scenario, whoIs(request), deps.now());
    if (added.kind === 'saved') tell(response, 'told', `"${scenario.name}" is saved.`);
    else tell(response, 'refused', `Not saved: ${added.why}.`);
    response.redirect(303, '/month');
  });

  router.get('/month/scenarios/:id', async (request, response) => {
    const stored = await found(String(request.params.id));
    await show(response, scenarioValues(stored.scenario, own), stored, []);
  });

  router.post('/month/scenarios/:id', async (request, response) => {
    const stored = await found(String(request.params.id));
    const values = formText(request);
    const { scenario, problems } = readScenarioForm(values, own, examIds);
    const seen = { ...stored, version: Number(values['version']) };
    if (problems.length > 0) return show(response, values, seen, problems);
    const saved = await store.scenarios.save(
      stored.id,
      seen.version,
      scenario,
      whoIs(request),
      deps.now(),
    );
    answer(response, saved.kind, `"${scenario.name}" is saved.`);
  });

  router.post('/month/scenarios/:id/remove', async (request, response) => {
    const stored = await found(String(request.params.id));
    const version = Number(formText(request)['version']);
    const removed = await store.scenarios.remove(stored.id, version, whoIs(request), deps.now());
    answer(response, removed.kind, `"${stored.scenario.name}" is taken out.`);
  });

  function answer(response: Response, kind: string, done: string) {
    if (kind === 'saved') tell(response, 'told', done);
    else
      tell(
        response,
        'refused',
        'Not changed: somebody else changed this scenario a moment ago. Look again.',
      );
    response.redirect(303, '/month');
  }

  async function found(id: string): Promise<StoredScenario> {
    const stored = await store.scenarios.get(id);
    if (stored === undefined) throw gone('scenario', id);
    return stored;
  }

  async function show(
    response: Response,
    values: ScenarioValues,
    stored: Pick<StoredScenario, 'id' | 'version'> | undefined,
    problems: ReturnType<typeof readScenarioForm>['problems'],
  ): Promise<void> {
    const { requests, usual } = await monthRecords(deps);
    const examsOnRecord = new Set(requests.map((r) => r.examId));
    response.status(problems.length > 0 ? 422 : 200).render('scenario', {
      title: stored === undefined ? 'A new scenario' : 'Change a scenario',
      stored,
      form: scenarioForm(values, own, ground.library, examsOnRecord, usual, problems),
    });
  }

  return router;
}

const formText = (request: Request): ScenarioValues =>
  Object.fromEntries(
    Object.entries(request.body as Record<string, unknown>).map(([key, value]) => [
      key,
      Array.isArray(value) ? String(value.at(-1)) : String(value),
    ]),
  );
