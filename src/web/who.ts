import { randomInt } from 'node:crypto';
import type { Request, RequestHandler, Response } from 'express';

const cookieName = 'stillspan_who';
const longestName = 40;

/** Whose name stands in the history: what the reader called this desk, or "desk". No password: the site's network decides who gets here. */
export function whoIs(request: Request): string {
  const cookies = request.headers.cookie?.split(';') ?? [];
  for (const cookie of cookies) {
    const [name, value] = cookie.trim().split('=');
    if (name !== cookieName || value === undefined) continue;
    try {
      return cleaned(decodeURIComponent(value)) || 'desk';
    } catch {
      return 'desk';
    }
  }
  return 'desk';
}

/**
 * Gives a browser without a name one of its own when it first opens a page: with one name for all, "undo my last change"
 * would take back another desk's.
 */
export const nameNewDesk: RequestHandler = (request, response, next) => {
  const cookie = request.headers.cookie ?? '';
  const opensPage = request.method === 'GET' && (request.get('accept') ?? '').includes('text/html');
  if (opensPage && !cookie.includes(`${cookieName}=`)) {
    const name = `desk ${randomInt(1000, 10_000)}`;
    rememberWho(response, name);
    const own = `${cookieName}=${encodeURIComponent(name)}`;
    request.headers.cookie = cookie === '' ? own : `${cookie}; ${own}`;
  }
  next();
};

export function rememberWho(response: Response, name: string): void {
  response.cookie(cookieName, cleaned(name), {
    httpOnly: true,
    sameSite: 'strict',
    maxAge: 180 * 24 * 3600 * 1000,
  });
}

const cleaned = (name: string) =>
  name
    .replace(/[^\p{L}\p{N} .,'-]/gu, '')
    .trim()
    .slice(0, longestName);
