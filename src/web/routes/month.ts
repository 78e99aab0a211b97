import { Router } from 'express';
import { monthCsv } from '../../cli/text/month-csv.js';
import { ProblemError } from '../../shared/index.js';
import type { StoredScenario } from '../../store/index.js';
import { gone } from '../board-fields.js';
import type { PageDeps } from '../deps.js';
import type { MonthRuns } from '../month/month-runs.js';
import { demandRecords, monthRecords } from '../month/records.js';
import { takeTold } from '../told.js';
import { monthList } from '../view-models/month-list.js';
import { monthResults } from '../view-models/month-results.js';

const leastCompared = 1;
const mostCompared = 6;

/** The month: scenarios side by side, simulated while the page waits, stopped at will. */
export function monthRoutes(deps: PageDeps, runs: MonthRuns): Router {
  const router = Router();

  router.get('/month', async (request, response) => {
    const stored = await deps.store.scenarios.list();
    response.render('month', {
      title: 'The month',
      told: takeTold(request, response),
      page: monthList(stored, runs.list()),
      mostCompared,
    });
  });

  router.post('/month/compare', async (request, response) => {
    const form = request.body as Record<string, unknown>;
    const ticked = [form['scenario'] ?? []].flat().map(String);
    const against = typeof form['against'] === 'string' ? form['against'] : '';
    const stored = await deps.store.scenarios.list();
    const chosen = stored.filter((s) => ticked.includes(s.id));
    if (chosen.length < leastCompared || chosen.length > mostCompared) {
      throw new ProblemError({
        code: 'month-compare',
        thing: 'scenarios to compare',
        value: `${chosen.length} ticked`,
        limit: `two to ${mostCompared}, or one to look at by itself`,
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
      results: run.comparison === undefined ? undefined : monthResults(run.comparison),
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

  router.get('/month/runs/:id/table.csv', (request, response) => {
    response.type('text/csv').send(monthCsv(comparisonOf(String(request.params.id))));
  });

  router.get('/month/runs/:id/table.json', (request, response) => {
    response.json(comparisonOf(String(request.params.id)));
  });

  function running(id: string) {
    const run = runs.get(id);
    if (run === undefined) throw gone('simulation', id);
    return run;
  }

  function comparisonOf(id: string) {
    const { comparison } = running(id);
    if (comparison === undefined) throw gone('result of simulation', id);
    return comparison;
  }

  return router;
}

/** The one that the others are held against comes first. */
function inOrder(chosen: readonly StoredScenario[], against: string) {
  const first = chosen.filter((s) => s.id === against);
  return [...first, ...chosen.filter((s) => s.id !== against)].map((s) => s.scenario);
}
