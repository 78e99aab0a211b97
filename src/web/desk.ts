import { randomUUID } from 'node:crypto';
import type { Request, Response } from 'express';

const cookieName = 'stillspan_desk';

/** A name for this browser that lasts until it is closed; two desks signed alike are still two. */
export function deskOf(request: Request, response: Response): string {
  const known = request.headers.cookie
    ?.split(';')
    .map((part) => part.trim())
    .find((part) => part.startsWith(`${cookieName}=`))
    ?.slice(cookieName.length + 1);
  if (known !== undefined && /^[0-9a-f-]{36}$/.test(known)) return known;
  const made = randomUUID();
  response.cookie(cookieName, made, { httpOnly: true, sameSite: 'strict' });
  return made;
}
