/**
 * Any sequence of placing, moving, resizing, cancelling and new statuses, against a model in memory that
 * knows one rule: two bookings never touch the same five minutes of a scanner or a team. The rule is the
 * design's; the model finds the five minutes minute by minute.
 */
import fc from 'fast-check';
import { expect, it } from 'vitest';
import { openDatabase, storeOn } from '../../src/store/store.js';
import type { Store } from '../../src/store/index.js';
import { expectWhole, piecesOf } from './check-whole.js';
import { day, examRequest, freshSettings, onEveryStore } from './ground.js';

const requestIds = ['R-1', 'R-2', 'R-3', 'R-4', 'R-5'];

const place = fc.record({
  scannerId: fc.constantFrom('mr1', 'mr2'),
  date: fc.constantFrom(day, '2026-12-09'),
  startMin: fc.oneof(
    fc.integer({ min: 480, max: 560 }),
    fc.integer({ min: 1400, max: 1439 }),
    fc.integer({ min: 0, max: 30 }),
  ),
  slotMin: fc.integer({ min: 1, max: 60 }),
  teams: fc.subarray(['sedation', 'contrast']),
});
const some = <T>(whole: fc.Arbitrary<T>) => fc.option(whole, { nil: undefined });
const requestId = fc.constantFrom(...requestIds);
const command = fc.oneof(
  fc.record({ do: fc.constant('place' as const), requestId, place }),
  fc.record({
    do: fc.constant('move' as const),
    requestId,
    place,
    only: some(fc.subarray(['scannerId', 'date', 'startMin', 'slotMin', 'teams'] as const)),
  }),
  fc.record({
    do: fc.constant('resize' as const),
    requestId,
    slotMin: fc.integer({ min: 1, max: 90 }),
  }),
  fc.record({ do: fc.constant('cancel' as const), requestId }),
  fc.record({
    do: fc.constant('status' as const),
    requestId,
    status: fc.constantFrom('arrived' as const, 'booked' as const, 'noshow' as const),
  }),
);
type Command = typeof command extends fc.Arbitrary<infer C> ? C : never;
type Place = typeof place extends fc.Arbitrary<infer P> ? P : never;

interface ModelBooking extends Place {
  readonly requestId: string;
  readonly status: string;
}

/** Live bookings by request. */
class Model {
  readonly live = new Map<string, ModelBooking>();

  private free(requestId: string, wanted: Place): boolean {
    const pieces = piecesOf(wanted);
    return ![...this.live.values()].some(
      (b) => b.requestId !== requestId && [...piecesOf(b)].some((piece) => pieces.has(piece)),
    );
  }

  /** What the store must answer. */
  apply(c: Command): string {
    const now = this.live.get(c.requestId);
    if (c.do === 'place') {
      if (now !== undefined) return 'stale';
      return this.put(c.requestId, c.place, 'booked');
    }
    if (now === undefined) return 'none';
    if (c.do === 'move') {
      const wanted =
        c.only === undefined ? c.place : Object.fromEntries(c.only.map((k) => [k, c.place[k]]));
      return this.put(c.requestId, { ...now, ...wanted }, now.status);
    }
    if (c.do === 'resize') return this.put(c.requestId, { ...now, slotMin: c.slotMin }, now.status);
    if (c.do === 'status') {
      if (c.status === now.status) return 'refused';
      if (c.status === 'noshow') {
        if (now.status === 'arrived') return 'refused';
        this.live.delete(c.requestId);
        return 'placed';
      }
      return this.put(c.requestId, now, c.status);
    }
    this.live.delete(c.requestId);
    return 'placed';
  }

  private put(
    requestId: string,
    { scannerId, date, startMin, slotMin, teams }: Place,
    status: string,
  ) {
    const wanted = { scannerId, date, startMin, slotMin, teams };
    if (!this.free(requestId, wanted)) return 'taken';
    this.live.set(requestId, { ...wanted, requestId, status });
    return 'placed';
  }
}

async function run(store: Store, c: Command): Promise<string> {
  if (c.do === 'place') {
    return (await store.bookings.place({ requestId: c.requestId, ...c.place }, 'Ina', 2)).kind;
  }
  const b = await store.bookings.ofRequest(c.requestId);
  if (b === undefined) return 'none';
  const outcome =
    c.do === 'move'
      ? await store.bookings.move(
          b.id,
          b.version,
          c.only === undefined ? c.place : Object.fromEntries(c.only.map((k) => [k, c.place[k]])),
          'Ina',
          2,
        )
      : c.do === 'resize'
        ? await store.bookings.resize(b.id, b.version, { slotMin: c.slotMin }, 'Ina', 2)
        : c.do === 'cancel'
          ? await store.bookings.cancel(b.id, b.version, 'Ina', 2)
          : await store.bookings.setStatus(b.id, b.version, c.status, 'Ina', 2);
  return outcome.kind;
}

async function board(store: Store): Promise<ReadonlyMap<string, unknown>> {
  const list = await store.bookings.listBetween('2026-12-01', '2026-12-31');
  return new Map(
    list.map(({ requestId, scannerId, date, startMin, slotMin, teams, status }) => [
      requestId,
      { scannerId, date, startMin, slotMin, teams, status, requestId },
    ]),
  );
}

onEveryStore('any sequence of changes', (kind) => {
  const runs = kind === 'sqlite in memory' ? 120 : 8;
  const withStore = async (work: (store: Store, whole: () => Promise<void>) => Promise<void>) => {
    const database = await openDatabase(await freshSettings(kind));
    try {
      const store = storeOn(database);
      await store.seed(
        { requests: requestIds.map((id) => examRequest(id)), bookings: [] },
        'Ina',
        1,
      );
      await work(store, () => expectWhole(database));
    } finally {
      await database.close();
    }
  };

  it('gives the outcomes of the model and leaves its board, with claims, statuses and history in step', async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(command, { minLength: 1, maxLength: 25 }), (commands) =>
        withStore(async (store, whole) => {
          const model = new Model();
          for (const c of commands) expect([c, await run(store, c)]).toEqual([c, model.apply(c)]);
          expect(await board(store)).toEqual(model.live);
          await whole();
        }),
      ),
      { seed: 20261208, numRuns: runs },
    );
  });

  it('is undone step by step, each undo giving the board before the change', async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(command, { minLength: 1, maxLength: 12 }), (commands) =>
        withStore(async (store, whole) => {
          const boards = [await board(store)];
          for (const c of commands) {
            if ((await run(store, c)) === 'placed') boards.push(await board(store));
          }
          while (boards.length > 1) {
            boards.pop();
            expect((await store.history.undoLast('Ina', 3)).kind).toBe('undone');
            expect(await board(store)).toEqual(boards.at(-1));
          }
          expect((await store.history.undoLast('Ina', 3)).kind).toBe('refused');
          await whole();
        }),
      ),
      { seed: 20261209, numRuns: runs },
    );
  });
});
