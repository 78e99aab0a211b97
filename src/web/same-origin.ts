import type { NextFunction, Request, Response } from 'express';

const reading = new Set(['GET', 'HEAD', 'OPTIONS']);

/** Refuses writes that another site's page sends in a reader's name (Fetch Metadata, W3C; Origin header, RFC 6454). */
export function sameOriginOnly(request: Request, response: Response, next: NextFunction): void {
  if (reading.has(request.method)) return next();
  const site = request.get('sec-fetch-site');
  const origin = request.get('origin');
  const foreignSite = site !== undefined && site !== 'same-origin' && site !== 'none';
  const foreignOrigin =
    origin !== undefined && origin !== 'null' && hostOf(origin) !== request.get('host');
  if (foreignSite || foreignOrigin) {
    response
      .status(403)
      .type('text/plain')
      .send('This change came from another site and was refused.');
    return;
  }
  next();
}

function hostOf(origin: string): string | undefined {
  try {
    return new URL(origin).host;
  } catch {
    return undefined;
  }
}
