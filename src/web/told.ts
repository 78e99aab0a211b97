import type { Request, Response } from 'express';

/** What the next page says about the change that led to it. */
export interface Told {
  readonly kind: 'told' | 'refused';
  readonly text: string;
}

const cookieName = 'stillspan_told';
const keptMs = 30_000;
/** A cookie of more than 4096 bytes is not kept at all (RFC 6265, section 6.1); a letter takes up to nine as written there. */
const longestText = 400;

/** Leaves a message for the next page of this reader; a cookie, so that no address can put words into our mouth. */
export function tell(response: Response, kind: Told['kind'], text: string): void {
  response.cookie(cookieName, JSON.stringify({ kind, text: shortened(text) }), {
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
    return sound ? { kind: value.kind!, text: value.text!.slice(0, longestText) } : undefined;
  } catch {
    return undefined;
  }
}

/** Cut between words, and seen to be cut. */
function shortened(text: string): string {
  if (text.length <= longestText) return text;
  const room = text.slice(0, longestText - ' ... and more.'.length);
  return `${room.slice(0, room.lastIndexOf(' '))} ... and more.`;
}
