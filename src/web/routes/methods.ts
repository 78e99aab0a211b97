import { Router } from 'express';
import type { WebDeps } from '../deps.js';

/** What is computed how, from which source, what is assumed, what it must not be used for. The text is the view's own. */
export function methodsRoutes(deps: WebDeps): Router {
  const router = Router();
  router.get('/methods', (_request, response) => {
    response.render('methods', {
      title: 'Methods and cautions',
      policy: deps.ground.library.policy,
    });
  });
  return router;
}
