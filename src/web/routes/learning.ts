import { Router } from 'express';
import type { PageDeps } from '../deps.js';
import { siteDate } from '../site-time.js';
import { learningPage } from '../view-models/learning-page.js';

/** What patients achieved against what plans count on. Read only: nothing is switched on by a click. */
export function learningRoutes(deps: PageDeps): Router {
  const router = Router();
  router.get('/learning', async (_request, response) => {
    const { library } = deps.ground;
    response.render('learning', {
      title: 'What patients achieved',
      page: learningPage({
        records: await deps.store.achieved.list(),
        written: deps.writtenPolicy ?? library.policy,
        library,
        scanners: deps.department.scanners,
        today: siteDate(deps.now(), deps.department.zone),
      }),
    });
  });
  return router;
}
