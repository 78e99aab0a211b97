import type { CanCome } from '../planning/index.js';
import type { DayStretch } from './scanners.js';

const noonMin = 12 * 60;

/** Whether a patient can come on a day and start in a stretch of it, and from when. */
export function canComeAt(
  canCome: CanCome,
  date: string,
  gap: DayStretch,
  slotMin: number,
): { readonly startMin: number } | { readonly why: string } {
  if (canCome.from !== undefined && date < canCome.from)
    return { why: `can come from ${canCome.from}` };
  if (canCome.until !== undefined && date > canCome.until)
    return { why: `can come until ${canCome.until}` };
  const startMin = canCome.partOfDay === 'afternoon' ? Math.max(gap.fromMin, noonMin) : gap.fromMin;
  if (canCome.partOfDay === 'morning' && startMin >= noonMin)
    return { why: 'can come in the morning only' };
  if (startMin + slotMin > gap.toMin) {
    return canCome.partOfDay === 'afternoon' && gap.fromMin + slotMin <= gap.toMin
      ? { why: 'can come in the afternoon only' }
      : { why: `needs ${slotMin} minutes` };
  }
  return { startMin };
}
