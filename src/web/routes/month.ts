import { Router } from 'express';
import { monthCsv } from '../../cli/text/month-csv.js';
import { ProblemError } from '../../shared/index.js';
import type { Scenario } from '../../throughput/index.js';
import type { StoredScenario } from '../../store/index.js';
import type { PageDeps } from '../deps.js';
import { mostKept, type MonthRuns } from '../month/month-runs.js';
import { demandRecords, monthRecords } from '../month/records.js';
import { takeTold } from '../told.js';
import { monthCaveats } from '../view-models/month-caveats.js';
import { monthList } from '../view-models/month-list.js';
import { monthResults } from '../view-models/month-results.js';

const mostCompared = 6;

/** The month: scenarios side by side, simulated while the page waits, stopped at will. */
export function monthRoutes(deps: PageDeps, runs: MonthRuns): Router {
  const router = Router();

  router.get('/month', async (request, response) => {
    const stored = await deps.store.scenarios.list();
    response.render('month', {
      title: 'The month',
      told: takeTold(request, response),
      page: monthList(stored, runs.list(), mostCompared),
      mostCompared,
    });
  });

  router.post('/month/compare', async (request, response) => {
    const form = request.body as Record<string, unknown>;
    const ticked = [form['scenario'] ?? []].flat().map(String);
    const against = typeof form['against'] === 'string' ? form['against'] : '';
    const stored = await deps.store.scenarios.list();
    const anyTicked = stored.some((s) => ticked.includes(s.id));
    // What the others are held against is simulated too, ticked or not.
    const chosen = stored.filter((s) => ticked.includes(s.id) || (anyTicked && s.id === against));
    if (chosen.length < 1 || chosen.length > mostCompared) {
      throw new ProblemError({
        code: 'month-compare',
        thing: 'scenarios to compare',
        value: `${chosen.length} chosen`,
        limit: `one to ${mostCompared}, the one under "Against" included`,
        wayOut: 'Go back and tick the ones to compare.',
      });
    }
    const { requests } = await monthRecords(deps);
    demandRecords(requests);
    const run = runs.start(inOrder(chosen, against), requests);
    response.redirect(303, `/month/runs/${run.id}`);
  });

  router.get('/month/runs/:id', (request, response) => {
    const run = running(String(request.params.id));
    response.render('month-run', {
      title: 'Scenarios side by side',
      run,
      percent: Math.round(100 * run.share),
      ...(run.comparison === undefined
        ? { results: undefined, caveats: [] }
        : {
            results: monthResults(run.comparison),
            caveats: monthCaveats(run.comparison, run.scenarios, run.records),
          }),
    });
  });

  router.get('/month/runs/:id/progress', (request, response) => {
    const { state, at, share } = running(String(request.params.id));
    response.set('Cache-Control', 'no-store').json({ state, at, percent: Math.round(100 * share) });
  });

  router.post('/month/runs/:id/stop', (request, response) => {
    const { id } = running(String(request.params.id));
    runs.stop(id);
    response.redirect(303, `/month/runs/${id}`);
  });

  router.post('/month/runs/:id/again', async (request, response) => {
    const { scenarios } = running(String(request.params.id));
    const { requests } = await monthRecords(deps);
    demandRecords(requests);
    response.redirect(303, `/month/runs/${runs.start(scenarios, requests).id}`);
  });

  router.get('/month/runs/:id/table.csv', (request, response) => {
    response.type('text/csv').send(monthCsv(comparisonOf(String(request.params.id))));
  });

  router.get('/month/runs/:id/table.json', (request, response) => {
    response.json(comparisonOf(String(request.params.id)));
  });

  function running(id: string) {
    const run = runs.get(id);
    if (run === undefined) throw forgotten(id);
    return run;
  }

  function comparisonOf(id: string) {
    const { comparison } = running(id);
    if (comparison === undefined) throw unfinished(id);
    return comparison;
  }

  return router;
}

/** The one that the others are held against comes first; scenarios of one name are told apart by their number. */
function inOrder(chosen: readonly StoredScenario[], against: string): readonly Scenario[] {
  const first = chosen.filter((s) => s.id === against);
  const ordered = [...first, ...chosen.filter((s) => s.id !== against)];
  return ordered.map(({ id, scenario }) => {
    const alone = chosen.filter((s) => s.scenario.name === scenario.name).length === 1;
    return alone ? scenario : { ...scenario, name: `${scenario.name} (${id})` };
  });
}

const forgotten = (id: string) =>
  new ProblemError({
    code: 'month-run-forgotten',
    thing: `simulation ${id}`,
    value: 'not known here',
    limit: `results are kept until the server is started anew, and the last ${mostKept} of them`,
    wayOut:
      'Open The month and compare the scenarios again: the same scenarios give the same result.',
  });

const unfinished = (id: string) =>
  new ProblemError({
    code: 'month-run-unfinished',
    thing: `table of simulation ${id}`,
    value: 'not there yet',
    limit: 'it is made when the simulation has ended',
    wayOut: 'Look at the page of the simulation.',
  });
