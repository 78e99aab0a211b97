/** A path on this site to go back to; anything else is replaced, so that no form can send a reader elsewhere. */
export function localPath(value: unknown, otherwise: string): string {
  return typeof value === 'string' && /^\/(?![/\\])[\x21-\x7e]*$/.test(value) ? value : otherwise;
}
