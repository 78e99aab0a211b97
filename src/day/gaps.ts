import type { Booking, DayStretch, Scanner } from './scanners.js';

/** Free stretches of a scanner's day: its hours without breaks and bookings, `leastMin` or longer. */
export function freeGaps(
  scanner: Scanner,
  bookings: readonly Pick<Booking, 'startMin' | 'slotMin'>[],
  leastMin = 5,
): readonly DayStretch[] {
  const taken = [
    ...scanner.breaks,
    ...bookings.map((b) => ({ fromMin: b.startMin, toMin: b.startMin + b.slotMin })),
  ].sort((a, b) => a.fromMin - b.fromMin);
  return scanner.hours.flatMap((hours) => {
    const gaps: DayStretch[] = [];
    let fromMin = hours.fromMin;
    for (const stretch of taken) {
      if (stretch.toMin <= fromMin || stretch.fromMin >= hours.toMin) continue;
      if (stretch.fromMin - fromMin >= leastMin) gaps.push({ fromMin, toMin: stretch.fromMin });
      fromMin = Math.max(fromMin, stretch.toMin);
    }
    if (hours.toMin - fromMin >= leastMin) gaps.push({ fromMin, toMin: hours.toMin });
    return gaps;
  });
}
