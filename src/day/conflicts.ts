import type { Problem } from '../shared/index.js';
import type { Booking, DayStretch, Department, Scanner } from './scanners.js';

/**
 * What is wrong with a set of bookings: unknown scanners and days, closed hours, breaks, overlaps.
 * Every conflict is named with both parties; nothing is moved.
 */
export function bookingConflicts(
  bookings: readonly Booking[],
  department: Department,
): readonly Problem[] {
  const problems: Problem[] = [];
  for (const booking of bookings) {
    const scanner = department.scanners.find((s) => s.id === booking.scannerId);
    if (scanner === undefined) {
      problems.push(
        conflict(
          booking,
          'scanner',
          `"${booking.scannerId}"`,
          `scanners: ${department.scanners.map((s) => s.id).join(', ')}`,
          'Name one of the scanners.',
        ),
      );
      continue;
    }
    problems.push(...hoursConflicts(booking, scanner));
  }
  const sorted = [...bookings].sort(
    (a, b) =>
      a.scannerId.localeCompare(b.scannerId) ||
      a.date.localeCompare(b.date) ||
      a.startMin - b.startMin,
  );
  let running: Booking | undefined;
  for (const next of sorted) {
    const sameBoard = running?.scannerId === next.scannerId && running.date === next.date;
    if (running !== undefined && sameBoard && next.startMin < running.startMin + running.slotMin) {
      problems.push(
        conflict(
          next,
          'start',
          clock(next.startMin),
          `scanner ${next.scannerId} is taken by ${running.requestId} until ${clock(running.startMin + running.slotMin)}`,
          'Move one of the two.',
        ),
      );
    }
    const endsLater =
      !sameBoard ||
      running === undefined ||
      next.startMin + next.slotMin > running.startMin + running.slotMin;
    if (endsLater) running = next;
  }
  return problems;
}

function hoursConflicts(booking: Booking, scanner: Scanner): Problem[] {
  const own: DayStretch = { fromMin: booking.startMin, toMin: booking.startMin + booking.slotMin };
  const problems: Problem[] = [];
  if (!scanner.hours.some((h) => own.fromMin >= h.fromMin && own.toMin <= h.toMin)) {
    problems.push(
      conflict(
        booking,
        'start',
        `${clock(own.fromMin)} to ${clock(own.toMin)}`,
        `scanner ${scanner.id} is staffed ${scanner.hours.map(stretchWords).join(', ')}`,
        'Choose a start inside the hours.',
      ),
    );
  }
  const met = scanner.breaks.find((b) => own.fromMin < b.toMin && b.fromMin < own.toMin);
  if (met !== undefined) {
    problems.push(
      conflict(
        booking,
        'start',
        `${clock(own.fromMin)} to ${clock(own.toMin)}`,
        `it runs into the break ${stretchWords(met)}`,
        'End before the break or start after it.',
      ),
    );
  }
  return problems;
}

function conflict(
  booking: Booking,
  field: string,
  value: string,
  limit: string,
  wayOut: string,
): Problem {
  return {
    code: 'booking-conflict',
    thing: `booking of ${booking.requestId}, field ${field}`,
    value,
    limit,
    wayOut,
  };
}

/** Minutes since midnight as 24-hour clock. */
export function clock(minutes: number): string {
  const hours = Math.floor(minutes / 60);
  return `${String(hours).padStart(2, '0')}:${String(minutes % 60).padStart(2, '0')}`;
}

const stretchWords = (s: DayStretch) => `${clock(s.fromMin)}-${clock(s.toMin)}`;
