import type { Request, Response } from 'express';

/** What the next page says about the change that led to it. */
export interface Told {
  readonly kind: 'told' | 'refused';
  readonly text: string;
}

const cookieName = 'stillspan_told';
const keptMs = 30_000;

/** Leaves a message for the next page of this reader; a cookie, so that no address can put words into our mouth. */
export function tell(response: Response, kind: Told['kind'], text: string): void {
  response.cookie(cookieName, JSON.stringify({ kind, text }), {
    httpOnly: true,
    sameSite: 'strict',
    maxAge: keptMs,
  });
}

/** The message left for this page, if any; it is shown once. */
export function takeTold(request: Request, response: Response): Told | undefined {
  const raw = request.headers.cookie
    ?.split(';')
    .map((part) => part.trim())
    .find((part) => part.startsWith(`${cookieName}=`));
  if (raw === undefined) return undefined;
  response.clearCookie(cookieName, { httpOnly: true, sameSite: 'strict' });
  try {
    const value = JSON.parse(decodeURIComponent(raw.slice(cookieName.length + 1))) as Partial<Told>;
    const sound =
      (value.kind === 'told' || value.kind === 'refused') && typeof value.text === 'string';
    return sound ? { kind: value.kind!, text: value.text!.slice(0, 300) } : undefined;
  } catch {
    return undefined;
  }
}
