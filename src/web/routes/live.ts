import { Router } from 'express';
import type { WebDeps } from '../deps.js';

const heartbeatMs = 20_000;

/** Tells every open page that something changed (server-sent events, WHATWG HTML); the page then asks for what it shows. */
export function liveRoutes(deps: WebDeps): Router {
  const router = Router();
  router.get('/live', (request, response) => {
    response.writeHead(200, {
      'Content-Type': 'text/event-stream',
      'Cache-Control': 'no-store',
      Connection: 'keep-alive',
    });
    response.write('retry: 2000\n\n');
    const stop = deps.store.onChange((seq) => {
      response.write(`id: ${seq}\nevent: change\ndata: ${seq}\n\n`);
    });
    const beat = setInterval(() => response.write(': still here\n\n'), heartbeatMs);
    request.on('close', () => {
      clearInterval(beat);
      stop();
    });
  });
  return router;
}
