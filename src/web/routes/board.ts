import { Router } from 'express';
import { boardPage } from '../board-page.js';
import type { PageDeps } from '../deps.js';

/** The day board: look at a day, open a gap or a booking in it. */
export function boardRoutes(deps: PageDeps): Router {
  const router = Router();
  const page = boardPage(deps);

  router.get('/', (_request, response) =>
    response.redirect(302, `/day/${deps.department.days[0]}`),
  );

  router.get('/day/:date', async (request, response) => {
    await page.show(request, response);
  });

  /** The board alone, for pages that are already open. */
  router.get('/day/:date/board', async (request, response) => {
    const { board } = await page.data(String(request.params.date));
    response.set('Cache-Control', 'no-store').render('parts/board', { board, openedId: undefined });
  });

  return router;
}
