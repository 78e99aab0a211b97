import { DateTime } from 'luxon';

/** An instant in the site's zone, 24-hour, with its offset where a clock change makes the hour ambiguous to a reader. */
export function siteTime(atMs: number, zone: string): string {
  return DateTime.fromMillis(atMs, { zone }).toFormat('yyyy-MM-dd HH:mm ZZ');
}

/** The site's date at an instant. */
export function siteDate(atMs: number, zone: string): string {
  return DateTime.fromMillis(atMs, { zone }).toFormat('yyyy-MM-dd');
}

/** A date some days away, by the calendar: clock changes do not move it. */
export function dayFrom(date: string, days: number): string {
  return DateTime.fromISO(date, { zone: 'utc' }).plus({ days }).toFormat('yyyy-MM-dd');
}

/** Mondays to Fridays among the days from a date on; the site's own closed days are not known here. */
export function workingDays(from: string, days: number): readonly string[] {
  return Array.from({ length: days }, (_, n) => dayFrom(from, n)).filter((day) => {
    const weekday = new Date(`${day}T12:00:00Z`).getUTCDay();
    return weekday !== 0 && weekday !== 6;
  });
}

/** Minutes since the site's midnight at an instant. */
export function siteMinute(atMs: number, zone: string): number {
  const { hour, minute } = DateTime.fromMillis(atMs, { zone });
  return 60 * hour + minute;
}

/** Instant of a place on the site's clock, epoch ms; in an hour that a clock change doubles, the first one. */
export function instantOf(date: string, startMin: number, zone: string): number {
  const [year, month, day] = date.split('-').map(Number);
  const hour = Math.floor(startMin / 60);
  const at = DateTime.fromObject(
    { year: year!, month: month!, day: day!, hour, minute: startMin % 60 },
    { zone },
  );
  // By itself the library takes the one that is like the season it is asked in.
  return Math.min(...at.getPossibleOffsets().map((possible) => possible.toMillis()));
}

/** Whether a text is a day of the calendar, as year-month-day. */
export function isDay(text: string): boolean {
  return /^\d{4}-\d{2}-\d{2}$/.test(text) && DateTime.fromISO(text, { zone: 'utc' }).isValid;
}
