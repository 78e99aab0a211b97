import type { Request, Response } from 'express';

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
