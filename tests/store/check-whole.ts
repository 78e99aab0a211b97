/**
 * Whether the bare tables say one and the same thing. Written from the rules of the design (a row per
 * five minutes touched, a line of history per write, a request's status from its bookings), apart from
 * the store's own code.
 */
import { expect } from 'vitest';
import type { Database } from '../../src/store/database.js';

/** Every five minutes that a booking touches, found minute by minute. */
export function piecesOf(booking: {
  readonly scannerId: string;
  readonly date: string;
  readonly startMin: number;
  readonly slotMin: number;
  readonly teams: readonly string[];
}): ReadonlySet<string> {
  const [year, month, dayOfMonth] = booking.date.split('-').map(Number) as [number, number, number];
  const sinceEpochMin = Date.UTC(year, month - 1, dayOfMonth) / 60_000;
  const pieces = new Set<string>();
  for (let minute = booking.startMin; minute < booking.startMin + booking.slotMin; minute++) {
    const tick = Math.floor((sinceEpochMin + minute) / 5);
    pieces.add(`scanner:${booking.scannerId} ${tick}`);
    for (const team of booking.teams) pieces.add(`team:${team} ${tick}`);
  }
  return pieces;
}

export async function expectWhole({ kysely }: Database): Promise<void> {
  const bookings = await kysely.selectFrom('booking').selectAll().orderBy('id').execute();
  const claims = await kysely.selectFrom('claim').selectAll().execute();
  const changes = await kysely.selectFrom('change').selectAll().orderBy('seq').execute();
  const requests = await kysely.selectFrom('request').selectAll().execute();

  const holding = bookings.filter((b) => ['booked', 'arrived', 'fulfilled'].includes(b.status));
  const wanted = holding.flatMap((b) => {
    const place = { scannerId: b.scanner_id, date: b.date, startMin: b.start_min };
    const teams = JSON.parse(b.teams) as string[];
    return [...piecesOf({ ...place, slotMin: b.slot_min, teams })].map((p) => `${p} ${b.id}`);
  });
  const held = claims.map((c) => `${c.resource} ${c.tick} ${c.booking_id}`);
  expect(held.sort()).toEqual(wanted.sort());

  for (const b of bookings) {
    const lines = changes.filter((c) => c.what === 'booking' && c.thing_id === b.id);
    expect(lines).toHaveLength(b.version);
    expect(JSON.parse(lines.at(-1)?.after ?? 'null')).toMatchObject({
      id: b.id,
      version: b.version,
      requestId: b.request_id,
      scannerId: b.scanner_id,
      date: b.date,
      startMin: b.start_min,
      slotMin: b.slot_min,
      status: b.status,
    });
  }
  for (const r of requests) {
    const own = holding.filter((b) => b.request_id === r.id);
    expect(own.length).toBeLessThanOrEqual(1);
    const status =
      own[0] === undefined ? undefined : own[0].status === 'fulfilled' ? 'done' : 'booked';
    if (status === undefined) expect(['waiting', 'cancelled']).toContain(r.status);
    else expect(r.status).toBe(status);
    expect(changes.filter((c) => c.what === 'request' && c.thing_id === r.id)).toHaveLength(
      r.version,
    );
  }
}
