import type { ErrorRequestHandler, RequestHandler } from 'express';
import { ProblemError, type Problem } from '../shared/index.js';
import type { WebDeps } from './deps.js';

/** The page for an address that is not one of ours. */
export const notFound: RequestHandler = (request, response) => {
  const problem: Problem = {
    code: 'no-such-page',
    thing: 'address',
    value: request.path,
    limit: 'no page lives there',
    wayOut: 'Go back, or choose a page above.',
  };
  response.status(404).render('problem', { title: 'No such page', problems: [problem] });
};

/** The one place that turns an error into a page: what, value, limit, way out. The log gets no patient data. */
export function pageErrors(deps: WebDeps): ErrorRequestHandler {
  return (error: unknown, request, response, next) => {
    if (response.headersSent) {
      next(error);
      return;
    }
    const status = statusOf(error);
    const problem: Problem =
      error instanceof ProblemError
        ? error.problem
        : {
            code: 'fault',
            thing: 'this page',
            value: status < 500 ? 'the request could not be read' : 'something broke inside',
            limit: 'nothing was changed by it',
            wayOut: 'Go back and try again; if it stays, tell whoever runs Stillspan here.',
          };
    if (status >= 500) {
      deps.log('page failed', {
        method: request.method,
        route:
          request.route === undefined
            ? 'unrouted'
            : String((request.route as { path: unknown }).path),
        error: error instanceof Error ? (error.stack ?? error.message) : String(error),
      });
    }
    response.status(status).render('problem', { title: 'That did not work', problems: [problem] });
  };
}

function statusOf(error: unknown): number {
  if (error instanceof ProblemError) return 422;
  const status = (error as { status?: unknown } | null)?.status;
  return typeof status === 'number' && status >= 400 && status < 500 ? status : 500;
}
