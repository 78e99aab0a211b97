/** A 24-hour time such as "09:30" as minutes since midnight; undefined for anything else. */
export function parseClockMin(text: string): number | undefined {
  const match = /^([01]\d|2[0-3]):([0-5]\d)$/.exec(text.trim());
  return match === null ? undefined : Number(match[1]) * 60 + Number(match[2]);
}
