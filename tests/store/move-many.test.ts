/** Several bookings moved at once. The rules are the design's: all or none, places may be swapped, one line of history each. */
import { expect, it } from 'vitest';
import type { ManyChange } from '../../src/store/index.js';
import { expectWhole } from './check-whole.js';
import { at, day, examRequest, expectKind, freshStore, onEveryStore, openAgain } from './ground.js';
import { board, bookThree, move } from './three-booked.js';

onEveryStore('several bookings moved at once', (kind) => {
  const threeBooked = () => bookThree(kind);

  it('two swap places, each with its line in the history', async () => {
    const fresh = await threeBooked();
    const { store, database } = fresh;
    const { bookings } = expectKind(
      await store.bookings.moveMany([move(1, 510), move(2, 480)], 'Ina', 3),
      'moved',
    );
    expect(bookings.map((b) => [b.requestId, b.startMin, b.version])).toEqual([
      ['R-1', 510, 2],
      ['R-2', 480, 2],
    ]);
    expect(await board(fresh)).toEqual({ 'R-1': 510, 'R-2': 480, 'R-3': 540 });
    for (const id of ['R-1.1', 'R-2.1']) {
      const lines = await store.history.of('booking', id);
      expect(lines.map((c) => [c.action, c.who])).toEqual([
        ['placed', 'Jo'],
        ['moved', 'Ina'],
      ]);
    }
    await expectWhole(database);
  });

  it('a chain of three moves up into each other, in whatever order it is written', async () => {
    for (const order of [
      [0, 1, 2],
      [2, 1, 0],
      [1, 2, 0],
    ]) {
      const fresh = await threeBooked();
      const chain = [move(1, 510), move(2, 540), move(3, 600)];
      expectKind(
        await fresh.store.bookings.moveMany(
          order.map((n) => chain[n]!),
          'Ina',
          3,
        ),
        'moved',
      );
      expect(await board(fresh)).toEqual({ 'R-1': 510, 'R-2': 540, 'R-3': 600 });
      await expectWhole(fresh.database);
    }
  });

  it('one is taken off, an emergency gets its place, another makes room: the request taken off waits again', async () => {
    const fresh = await threeBooked();
    const { store, database } = fresh;
    const outcome = await store.bookings.moveMany(
      [
        { place: { requestId: 'R-4', requestVersion: 1, ...at(480, 45), plan: { urgent: true } } },
        { id: 'R-1.1', version: 1, cancel: true },
        move(2, 600),
      ],
      'Ina',
      3,
    );
    expectKind(outcome, 'moved');
    expect(await board(fresh)).toEqual({ 'R-4': 480, 'R-2': 600, 'R-3': 540 });
    expect((await store.requests.get('R-1'))?.status).toBe('waiting');
    expect((await store.requests.get('R-4'))?.status).toBe('booked');
    await expectWhole(database);
  });

  it('a place that somebody else holds refuses the whole, names the holder, and writes nothing', async () => {
    const fresh = await threeBooked();
    const { store, database } = fresh;
    const seq = await store.history.lastSeq();
    const outcome = expectKind(
      await store.bookings.moveMany(
        [{ place: { requestId: 'R-4', ...at(700, 30) } }, move(1, 600), move(2, 545)],
        'Ina',
        3,
      ),
      'taken',
    );
    expect(outcome).toMatchObject({ wantedFor: 'R-2', by: { requestId: 'R-3', startMin: 540 } });
    expect(await board(fresh)).toEqual({ 'R-1': 480, 'R-2': 510, 'R-3': 540 });
    expect(await store.history.lastSeq()).toBe(seq);
    expect((await store.requests.get('R-4'))?.status).toBe('waiting');
    await expectWhole(database);
  });

  it('a team that is held elsewhere refuses the whole', async () => {
    const { store, database } = await threeBooked();
    const held = { ...at(600, 30, ['sedation']), scannerId: 'mr2' };
    await store.bookings.place({ requestId: 'R-4', ...held }, 'Jo', 3);
    const outcome = await store.bookings.moveMany(
      [move(1, 700), { id: 'R-2.1', version: 1, to: { startMin: 605, teams: ['sedation'] } }],
      'Ina',
      4,
    );
    expect(expectKind(outcome, 'taken').by).toMatchObject({ resource: 'team:sedation' });
    await expectWhole(database);
  });

  it('a version that is not the newest makes the whole stale, and nothing is written', async () => {
    const fresh = await threeBooked();
    const { store, database } = fresh;
    await store.bookings.setStatus('R-2.1', 1, 'arrived', 'Jo', 3);
    const seq = await store.history.lastSeq();
    const { why } = expectKind(
      await store.bookings.moveMany([move(1, 600), move(2, 640)], 'Ina', 4),
      'stale',
    );
    expect(why).toContain('R-2.1');
    expect(await store.history.lastSeq()).toBe(seq);
    expect(await board(fresh)).toEqual({ 'R-1': 480, 'R-2': 510, 'R-3': 540 });
    // The emergency's own request, changed meanwhile, is no different.
    const body = examRequest('R-4', { slotS: 900 });
    await store.requests.change('R-4', 1, { body }, 'Jo', 5);
    expectKind(
      await store.bookings.moveMany(
        [move(1, 600), { place: { requestId: 'R-4', requestVersion: 1, ...at(480, 30) } }],
        'Ina',
        6,
      ),
      'stale',
    );
    expect(await board(fresh)).toEqual({ 'R-1': 480, 'R-2': 510, 'R-3': 540 });
    await expectWhole(database);
  });

  it('refuses two in one place, one booking twice, one that is not there, one that is done, and nothing at all', async () => {
    const fresh = await threeBooked();
    const { store, database } = fresh;
    const many = (...changes: ManyChange[]) => store.bookings.moveMany(changes, 'Ina', 3);
    const { why } = expectKind(await many(move(1, 600), move(2, 610)), 'refused');
    expect(why).toContain('R-1');
    expect(why).toContain('R-2');
    expectKind(await many(move(1, 600), move(1, 700)), 'refused');
    expectKind(await many(move(1, 600), { id: 'R-9.1', version: 1, cancel: true }), 'refused');
    expectKind(await many(), 'refused');
    const answers = [{ questionId: 'a', name: 'A', grade: 'diagnostic' }] as const;
    const exam = { bookingId: 'R-3.1', version: 1, answers, dueDate: '2026-12-20' };
    await store.owed.recordDone(exam, 'Jo', 4);
    expectKind(await many(move(1, 600), move(3, 700, 2)), 'refused');
    expectKind(await many(move(1, 600), { id: 'R-3.1', version: 2, cancel: true }), 'refused');
    expect(await board(fresh)).toEqual({ 'R-1': 480, 'R-2': 510, 'R-3': 540 });
    await expectWhole(database);
  });
});

onEveryStore(
  'two joint changes at once',
  (kind) => {
    it('from two connections that want the same place: one is made whole, the other not at all', async () => {
      const one = await freshStore(kind);
      const two = await openAgain(one.settings);
      const ids = Array.from({ length: 8 }, (_, n) => `R-${n + 1}`);
      await one.store.seed(
        {
          requests: ids.map((id) => examRequest(id)),
          bookings: ids.map((requestId, n) => ({ requestId, ...at(480 + 30 * n, 30) })),
        },
        'Ina',
        1,
      );
      const swap = (a: number, b: number): ManyChange[] => [
        { id: `R-${a}.1`, version: 1, to: { startMin: 480 + 30 * (b - 1) } },
        { id: `R-${b}.1`, version: 1, to: { startMin: 800 } },
      ];
      const outcomes = await Promise.all([
        one.store.bookings.moveMany(swap(1, 2), 'Ina', 2),
        two.store.bookings.moveMany(swap(3, 4), 'Jo', 2),
      ]);
      const kinds = outcomes.map((o) => o.kind).sort();
      expect(kinds).toEqual(['moved', 'taken']);
      const moved = (await one.store.bookings.listDay(day)).filter((b) => b.version === 2);
      expect(moved.map((b) => b.requestId).sort()).toEqual(
        outcomes[0].kind === 'moved' ? ['R-1', 'R-2'] : ['R-3', 'R-4'],
      );
      await expectWhole(one.database);
    });

    it('from two connections over the same bookings: one is made, the other is stale', async () => {
      const one = await freshStore(kind);
      const two = await openAgain(one.settings);
      await one.store.seed(
        {
          requests: ['R-1', 'R-2'].map((id) => examRequest(id)),
          bookings: ['R-1', 'R-2'].map((requestId, n) => ({ requestId, ...at(480 + 30 * n, 30) })),
        },
        'Ina',
        1,
      );
      const to = (start: number): ManyChange[] => [
        { id: 'R-1.1', version: 1, to: { startMin: start } },
        { id: 'R-2.1', version: 1, to: { startMin: start + 60 } },
      ];
      const outcomes = await Promise.all([
        one.store.bookings.moveMany(to(600), 'Ina', 2),
        two.store.bookings.moveMany(to(900), 'Jo', 2),
      ]);
      expect(outcomes.map((o) => o.kind).sort()).toEqual(['moved', 'stale']);
      await expectWhole(one.database);
    });
  },
  ['sqlite file', 'postgres'],
);
