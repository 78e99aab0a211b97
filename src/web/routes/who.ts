import { Router } from 'express';
import { localPath } from '../local-path.js';
import { rememberWho } from '../who.js';

/** Sets the name that changes are written under. */
export function whoRoutes(): Router {
  const router = Router();
  router.post('/who', (request, response) => {
    const body = request.body as Record<string, unknown>;
    rememberWho(response, String(body['who'] ?? ''));
    response.redirect(303, localPath(body['back'], '/'));
  });
  return router;
}
