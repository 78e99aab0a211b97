import type { WebDeps } from './deps.js';
import { dayFrom, isDay, siteDate } from './site-time.js';
import { searchLengths } from './view-models/fill-page.js';

/** The department's coming days, or the ones asked for, two weeks at most. */
export function daysAsked(
  { department, now }: Pick<WebDeps, 'department' | 'now'>,
  from: unknown,
  until: unknown,
): readonly string[] {
  const today = siteDate(now(), department.zone);
  const own = department.days.filter((d) => d >= today);
  const first = typeof from === 'string' && isDay(from) ? from : (own[0] ?? today);
  const last =
    typeof until === 'string' && isDay(until) && until >= first
      ? until
      : (own[own.length - 1] ?? dayFrom(first, 6));
  const days = Array.from({ length: 14 }, (_, n) => dayFrom(first, n));
  return days.filter((d) => d <= last || d === first);
}

/** One of the lengths offered, the shortest when it is none of them. */
export const secondsAsked = (value: unknown): number =>
  (searchLengths.find((l) => String(l.seconds) === value) ?? searchLengths[0]).seconds;
