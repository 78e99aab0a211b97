import { Router } from 'express';
import { gone } from '../board-fields.js';
import type { PageDeps } from '../deps.js';
import { deskOf } from '../desk.js';
import { daysAsked, secondsAsked } from '../fill-asked.js';
import { FillSearches } from '../fill-searches.js';
import { tell } from '../told.js';
import { endedWords, fillView, searchView } from '../view-models/fill-page.js';

/** Searches for places that take a while: started, watched, stopped with what they have. */
export function fillSearchRoutes(deps: PageDeps): Router {
  const router = Router();
  const searches = new FillSearches(deps);

  router.post('/fill/searches', async (request, response) => {
    const form = request.body as Record<string, unknown>;
    const all = await deps.store.requests.list();
    if (!all.some((r) => r.status === 'waiting')) {
      tell(response, 'told', 'Nobody waits for a place.');
      response.redirect(303, '/fill');
      return;
    }
    const { id } = searches.start(
      deskOf(request, response),
      daysAsked(deps, form['from'], form['until']),
      secondsAsked(form['seconds']),
    );
    response.redirect(303, `/fill/searches/${id}`);
  });

  router.get('/fill/searches/:id', (request, response) => {
    const search = found(String(request.params.id));
    response.render('fill-search', {
      title: 'Fill the days',
      search,
      days: search.days,
      view: searchView(search),
      ended: endedWords(search),
      proposed:
        search.proposal === undefined ? undefined : fillView(search.proposal, deps.department),
    });
  });

  router.get('/fill/searches/:id/progress', (request, response) => {
    const search = found(String(request.params.id));
    response.set('Cache-Control', 'no-store').json({ state: search.state, ...searchView(search) });
  });

  router.post('/fill/searches/:id/stop', async (request, response) => {
    const { id } = found(String(request.params.id));
    await searches.stop(id);
    response.redirect(303, `/fill/searches/${id}`);
  });

  function found(id: string) {
    const search = searches.look(id);
    if (search === undefined) throw gone('search for places', id);
    return search;
  }

  return router;
}
