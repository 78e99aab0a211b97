import { stepMin, type TakenPlace } from '../day/index.js';
import type { PageDeps } from './deps.js';
import { siteDate, siteMinute } from './site-time.js';

/** The first start of a stretch that has not gone by, in whole steps, minutes since midnight. */
export const notBefore = (fromMin: number, nowMin: number): number =>
  Math.max(fromMin, Math.ceil(nowMin / stepMin) * stepMin);

/** The site's date and minute now. */
export const siteNow = ({ now, department }: Pick<PageDeps, 'now' | 'department'>) => ({
  date: siteDate(now(), department.zone),
  minute: siteMinute(now(), department.zone),
});

/** What has gone by of today, held as if it were booked, so that nobody is proposed a place in it. */
export function pastPlaces(
  deps: Pick<PageDeps, 'now' | 'department'>,
  days: readonly string[],
): readonly TakenPlace[] {
  const { date, minute } = siteNow(deps);
  const slotMin = notBefore(0, minute);
  if (slotMin === 0 || !days.includes(date)) return [];
  return deps.department.scanners.map(({ id: scannerId }) => ({
    ...{ requestId: 'what has gone by', scannerId, date, startMin: 0, slotMin },
  }));
}
