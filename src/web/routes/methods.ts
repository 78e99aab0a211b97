import { Router } from 'express';
import type { WebDeps } from '../deps.js';
import { methodsPage } from '../view-models/methods-page.js';

/** What is computed how, from which source, what is assumed, what it must not be used for. The text is the view's own. */
export function methodsRoutes(deps: WebDeps): Router {
  const router = Router();
  const page = methodsPage(deps.ground.library.policy);
  router.get('/methods', (_request, response) => {
    response.render('methods', { title: 'Methods and cautions', page });
  });
  return router;
}
