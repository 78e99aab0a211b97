import { Router } from 'express';
import type { WebDeps } from '../deps.js';
import { policyPage } from '../view-models/policy-page.js';

/** The site policy in the open: every value with basis and source, every signed entry with who and when. */
export function policyRoutes(deps: WebDeps): Router {
  const router = Router();
  const page = policyPage(deps.ground.library);
  router.get('/policy', (_request, response) => {
    response.render('policy', { title: 'Site policy', page });
  });
  return router;
}
