import { isDeepStrictEqual } from 'node:util';
import { Router, type Request, type Response } from 'express';
import type { Scenario } from '../../throughput/index.js';
import type { StoredScenario } from '../../store/index.js';
import { gone } from '../board-fields.js';
import type { PageDeps } from '../deps.js';
import { readScenarioForm } from '../month/read-scenario-form.js';
import { monthRecords } from '../month/records.js';
import { tell } from '../told.js';
import type { ScenarioValues } from '../view-models/scenario-fields.js';
import { scannersAsked, scenarioForm, scenarioValues } from '../view-models/scenario-form.js';
import { changedMeanwhile, notKept, takenOutMeanwhile } from '../view-models/scenario-refusals.js';
import { whoIs } from '../who.js';

type FormProblems = ReturnType<typeof readScenarioForm>['problems'];

/** The scenario that a form was opened with: the one it changes, or the one it began as a copy of. */
interface Origin {
  readonly stored?: Pick<StoredScenario, 'id' | 'version'>;
  readonly from?: StoredScenario;
}

/** One scenario: described, copied, changed, taken out. What was typed stays in the form until it is saved. */
export function monthScenarioRoutes(deps: PageDeps): Router {
  const router = Router();
  const { store, department, ground } = deps;
  const examIds = [...ground.library.exams.keys()];
  const scannersFor = (origin: Scenario | undefined) =>
    scannersAsked(department.scanners, origin?.scanners);

  router.get('/month/new', async (request, response) => {
    const from = await found(request.query['from']);
    const { usual } = await monthRecords(deps);
    const start: Scenario =
      from === undefined
        ? { ...usual.scenario, name: 'As it is' }
        : { ...from.scenario, name: `Copy of ${from.scenario.name}`.slice(0, 80) };
    const values = scenarioValues(start, scannersFor(from?.scenario));
    await show(response, values, from === undefined ? {} : { from }, []);
  });

  router.post('/month/scenarios', async (request, response) => {
    const values = formText(request);
    const from = await found(values['from']);
    const origin = from === undefined ? {} : { from };
    const { scenario, problems } = readScenarioForm(values, scannersFor(from?.scenario), examIds);
    if (problems.length > 0) return show(response, values, origin, problems);
    const added = await store.scenarios.add(scenario, whoIs(request), deps.now());
    if (added.kind !== 'saved') return show(response, values, origin, [notKept(added.why)]);
    saved(response, `"${scenario.name}" is saved.`);
  });

  router.get('/month/scenarios/:id', async (request, response) => {
    const stored = await demand(String(request.params.id));
    const values = scenarioValues(stored.scenario, scannersFor(stored.scenario));
    await show(response, values, { stored }, []);
  });

  router.post('/month/scenarios/:id', async (request, response) => {
    const id = String(request.params.id);
    const values = formText(request);
    const before = await found(id);
    const own = scannersFor(before?.scenario);
    const { scenario, problems } = readScenarioForm(values, own, examIds);
    // Taken out meanwhile: what was typed may still be kept as a new one.
    if (before === undefined) return show(response, values, {}, [takenOutMeanwhile, ...problems]);
    const version = Number(values['version']);
    if (problems.length > 0) return show(response, values, { stored: { id, version } }, problems);
    const { kind } = await store.scenarios.save(
      ...([id, version, scenario, whoIs(request), deps.now()] as const),
    );
    if (kind === 'saved') return saved(response, `"${scenario.name}" is saved.`);
    const now = await found(id);
    if (now === undefined) return show(response, values, {}, [takenOutMeanwhile]);
    // The button pressed twice, or two with the same wish: there is nothing to settle.
    if (isDeepStrictEqual(now.scenario, scenario))
      return saved(response, `"${scenario.name}" is saved.`);
    await show(response, values, { stored: now }, [changedMeanwhile(now.scenario.name)]);
  });

  router.post('/month/scenarios/:id/remove', async (request, response) => {
    const stored = await demand(String(request.params.id));
    const version = Number(formText(request)['version']);
    const { kind } = await store.scenarios.remove(
      ...([stored.id, version, whoIs(request), deps.now()] as const),
    );
    if (kind === 'saved') return saved(response, `"${stored.scenario.name}" is taken out.`);
    tell(
      response,
      'refused',
      `"${stored.scenario.name}" is not taken out: somebody else changed it a moment ago. Look at it again.`,
    );
    response.redirect(303, '/month');
  });

  function saved(response: Response, words: string): void {
    tell(response, 'told', words);
    response.redirect(303, '/month');
  }

  async function found(id: unknown): Promise<StoredScenario | undefined> {
    return typeof id === 'string' && id !== '' ? await store.scenarios.get(id) : undefined;
  }

  async function demand(id: string): Promise<StoredScenario> {
    const stored = await found(id);
    if (stored === undefined) throw gone('scenario', id);
    return stored;
  }

  async function show(
    response: Response,
    values: ScenarioValues,
    { stored, from }: Origin,
    problems: FormProblems,
  ): Promise<void> {
    const { requests, usual } = await monthRecords(deps);
    const examsOnRecord = new Set(requests.map((r) => r.examId));
    const origin = stored === undefined ? from : await found(stored.id);
    response.status(problems.length > 0 ? 422 : 200).render('scenario', {
      title: stored === undefined ? 'A new scenario' : 'Change a scenario',
      stored,
      from: from?.id,
      form: scenarioForm({
        ...{ values, library: ground.library, examsOnRecord, usual, problems },
        own: scannersFor(origin?.scenario),
      }),
    });
  }

  return router;
}

const formText = (request: Request): ScenarioValues =>
  Object.fromEntries(
    Object.entries((request.body ?? {}) as Record<string, unknown>).map(([key, value]) => [
      key,
      Array.isArray(value) ? String(value.at(-1)) : String(value),
    ]),
  );
