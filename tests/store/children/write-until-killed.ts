/**
 * A process of its own that changes bookings at random and says each commit on its standard output, one
 * JSON line per commit, until it is killed. Every commit has its own `atMs`, so that its lines of
 * history can be told from the next one's.
 */
import { writeSync } from 'node:fs';
import { openStore, type PlacingOutcome, type StoreSettings } from '../../../src/store/index.js';
import { at } from '../ground-places.js';

const { settings, requestIds, seed } = JSON.parse(process.argv[2] ?? '') as {
  readonly settings: StoreSettings;
  readonly requestIds: readonly string[];
  readonly seed: number;
};

/** Numerical Recipes' linear congruential generator: chance enough to mix the writes. */
let state = seed >>> 0;
const below = (n: number) => {
  state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
  return Math.floor((state / 2 ** 32) * n);
};

const store = await openStore(settings);
let atMs = (await store.history.since(0)).length === 0 ? 1 : seed * 1_000_000;
for (;;) {
  atMs += 1;
  const requestId = requestIds[below(requestIds.length)] ?? '';
  const booking = await store.bookings.ofRequest(requestId);
  const startMin = 480 + below(100) * 5;
  const slotMin = 5 + below(60);
  const teams = below(2) === 0 ? [] : ['sedation'];
  let outcome: PlacingOutcome;
  if (booking === undefined) {
    const place = { ...at(startMin, slotMin, teams), scannerId: `mr${1 + below(2)}` };
    outcome = await store.bookings.place({ requestId, ...place, plan: { n: atMs } }, 'Ina', atMs);
  } else if (below(4) === 0) {
    outcome = await store.bookings.cancel(booking.id, booking.version, 'Ina', atMs);
  } else {
    outcome = await store.bookings.move(
      booking.id,
      booking.version,
      { startMin, slotMin, teams },
      'Ina',
      atMs,
    );
  }
  if (outcome.kind === 'placed') {
    writeSync(
      1,
      `${JSON.stringify({ atMs, id: outcome.booking.id, version: outcome.booking.version })}\n`,
    );
  }
}
