/** Places on the board. Every fact holds for any right store of this design; clock times are its own examples. */
import { expect, it } from 'vitest';
import { expectWhole } from './check-whole.js';
import { at, examRequest, expectKind, freshStore, onEveryStore } from './ground.js';

onEveryStore('places', (kind) => {
  const withRequests = async (...ids: readonly string[]) => {
    const fresh = await freshStore(kind);
    for (const id of ids) await fresh.store.requests.add(examRequest(id), 'Ina', 1);
    return fresh;
  };

  it('08:00 for 30 minutes and 08:30 for 30 minutes stand side by side', async () => {
    const { store, database } = await withRequests('R-1', 'R-2');
    expectKind(
      await store.bookings.place({ requestId: 'R-1', ...at(480, 30) }, 'Ina', 2),
      'placed',
    );
    expectKind(
      await store.bookings.place({ requestId: 'R-2', ...at(510, 30) }, 'Ina', 3),
      'placed',
    );
    expect((await store.bookings.listDay('2026-12-08')).map((b) => b.requestId)).toEqual([
      'R-1',
      'R-2',
    ]);
    await expectWhole(database);
  });

  it('08:00 for 31 minutes and 08:30 do not, whichever comes first', async () => {
    for (const [first, second] of [
      [at(480, 31), at(510, 30)],
      [at(510, 30), at(480, 31)],
    ] as const) {
      const { store, database } = await withRequests('R-1', 'R-2');
      expectKind(await store.bookings.place({ requestId: 'R-1', ...first }, 'Ina', 2), 'placed');
      const { by } = expectKind(
        await store.bookings.place({ requestId: 'R-2', ...second }, 'Ina', 3),
        'taken',
      );
      expect(by).toMatchObject({
        requestId: 'R-1',
        startMin: first.startMin,
        slotMin: first.slotMin,
      });
      expect((await store.requests.get('R-2'))?.status).toBe('waiting');
      await expectWhole(database);
    }
  });

  it('a place past midnight holds the scanner on the next day', async () => {
    const { store } = await withRequests('R-1', 'R-2', 'R-3');
    expectKind(
      await store.bookings.place({ requestId: 'R-1', ...at(1425, 30) }, 'Ina', 2),
      'placed',
    );
    const next = { ...at(10, 20), date: '2026-12-09' };
    expectKind(await store.bookings.place({ requestId: 'R-2', ...next }, 'Ina', 3), 'taken');
    const later = { ...next, startMin: 15 };
    expectKind(await store.bookings.place({ requestId: 'R-3', ...later }, 'Ina', 3), 'placed');
  });

  it('a team cannot be on two scanners at once, and the outcome names it', async () => {
    const { store } = await withRequests('R-1', 'R-2', 'R-3');
    const elsewhere = (teams: readonly string[]) => ({ ...at(500, 30, teams), scannerId: 'mr2' });
    await store.bookings.place({ requestId: 'R-1', ...at(480, 30, ['sedation']) }, 'Ina', 2);
    const { by } = expectKind(
      await store.bookings.place({ requestId: 'R-2', ...elsewhere(['sedation']) }, 'Ina', 3),
      'taken',
    );
    expect(by).toMatchObject({ resource: 'team:sedation', requestId: 'R-1', scannerId: 'mr1' });
    expectKind(
      await store.bookings.place({ requestId: 'R-3', ...elsewhere([]) }, 'Ina', 3),
      'placed',
    );
  });

  it('a request has one place; asking again is stale and changes nothing', async () => {
    const { store, database } = await withRequests('R-1');
    await store.bookings.place({ requestId: 'R-1', ...at(480, 30) }, 'Ina', 2);
    const before = await store.history.lastSeq();
    expectKind(await store.bookings.place({ requestId: 'R-1', ...at(600, 30) }, 'Jo', 3), 'stale');
    expect(await store.history.lastSeq()).toBe(before);
    await expectWhole(database);
  });

  it('a plan made from an older version of the request is stale', async () => {
    const { store } = await withRequests('R-1');
    await store.requests.change('R-1', 1, { body: examRequest('R-1', { escort: true }) }, 'Jo', 2);
    const wanted = { requestId: 'R-1', ...at(480, 30), requestVersion: 1 };
    expectKind(await store.bookings.place(wanted, 'Ina', 3), 'stale');
    expectKind(await store.bookings.place({ ...wanted, requestVersion: 2 }, 'Ina', 4), 'placed');
  });

  it('an unknown request is refused', async () => {
    const { store } = await freshStore(kind);
    expectKind(
      await store.bookings.place({ requestId: 'R-9', ...at(480, 30) }, 'Ina', 2),
      'refused',
    );
  });

  it('of two people changing one booking, the second is told that it is stale', async () => {
    const { store } = await withRequests('R-1');
    await store.bookings.place({ requestId: 'R-1', ...at(480, 30) }, 'Ina', 2);
    expectKind(await store.bookings.move('R-1.1', 1, { startMin: 600 }, 'Ina', 3), 'placed');
    expectKind(await store.bookings.move('R-1.1', 1, { startMin: 700 }, 'Jo', 3), 'stale');
    expectKind(await store.bookings.resize('R-1.1', 1, { slotMin: 45 }, 'Jo', 3), 'stale');
    expectKind(await store.bookings.cancel('R-1.1', 1, 'Jo', 3), 'stale');
    expect(await store.bookings.get('R-1.1')).toMatchObject({
      startMin: 600,
      slotMin: 30,
      version: 2,
    });
  });

  it('a booking may move onto its own place, shifted by less than its length', async () => {
    const { store, database } = await withRequests('R-1');
    await store.bookings.place({ requestId: 'R-1', ...at(480, 30) }, 'Ina', 2);
    expectKind(await store.bookings.move('R-1.1', 1, { startMin: 495 }, 'Ina', 3), 'placed');
    await expectWhole(database);
  });

  it.each(['cancelled', 'noshow'] as const)(
    'a booking that is %s frees its place, and takes it back only while it is free',
    async (status) => {
      const { store, database } = await withRequests('R-1', 'R-2');
      await store.bookings.place({ requestId: 'R-1', ...at(480, 30) }, 'Ina', 2);
      expectKind(await store.bookings.setStatus('R-1.1', 1, status, 'Ina', 3), 'placed');
      expect((await store.requests.get('R-1'))?.status).toBe('waiting');
      expect(await store.bookings.ofRequest('R-1')).toBeUndefined();
      expectKind(
        await store.bookings.place({ requestId: 'R-2', ...at(490, 30) }, 'Ina', 4),
        'placed',
      );
      expectKind(await store.bookings.setStatus('R-1.1', 2, 'booked', 'Ina', 5), 'taken');
      await store.bookings.cancel('R-2.1', 1, 'Ina', 6);
      expectKind(await store.bookings.setStatus('R-1.1', 2, 'booked', 'Ina', 7), 'placed');
      expect((await store.requests.get('R-1'))?.status).toBe('booked');
      await expectWhole(database);
    },
  );

  it('a request that was cancelled does not get its old place back', async () => {
    const { store, database } = await withRequests('R-1');
    await store.bookings.place({ requestId: 'R-1', ...at(480, 30) }, 'Ina', 2);
    await store.bookings.setStatus('R-1.1', 1, 'noshow', 'Ina', 3);
    const { version } = expectKind(
      await store.requests.change('R-1', 3, { status: 'cancelled' }, 'Ina', 4),
      'changed',
    ).request;
    expect(version).toBe(4);
    expectKind(await store.bookings.setStatus('R-1.1', 2, 'booked', 'Ina', 5), 'refused');
    expectKind(await store.bookings.setStatus('R-1.1', 2, 'cancelled', 'Ina', 6), 'placed');
    expect((await store.requests.get('R-1'))?.status).toBe('cancelled');
    await expectWhole(database);
  });

  it('a kept plan goes when the scanner, the slot or the request changes, and stays over a mere shift', async () => {
    const { store } = await withRequests('R-1');
    const plan = { chanceToFinish: 0.9, answers: [{ questionId: 'meniscal-tear' }] };
    await store.bookings.place({ requestId: 'R-1', ...at(480, 30), plan }, 'Ina', 2);
    const planNow = async () => (await store.bookings.get('R-1.1'))?.plan;
    expect(await planNow()).toEqual(plan);
    await store.bookings.move('R-1.1', 1, { startMin: 600 }, 'Ina', 3);
    expect(await planNow()).toEqual(plan);
    await store.bookings.resize('R-1.1', 2, { slotMin: 45 }, 'Ina', 4);
    expect(await planNow()).toBeNull();
    await store.bookings.keepPlan('R-1.1', 3, plan, 'Ina', 5);
    await store.requests.change('R-1', 2, { body: examRequest('R-1', { note: 'x' }) }, 'Ina', 6);
    expect(await planNow()).toEqual(plan);
    await store.requests.change('R-1', 3, { body: examRequest('R-1', { slotS: 900 }) }, 'Ina', 7);
    expect(await planNow()).toBeNull();
    await store.bookings.move('R-1.1', 5, { scannerId: 'mr2', plan }, 'Ina', 8);
    expect(await planNow()).toEqual(plan);
    await store.bookings.move('R-1.1', 6, { scannerId: 'mr1' }, 'Ina', 9);
    expect(await planNow()).toBeNull();
  });

  it('a day and a stretch of days list what holds a place, in order', async () => {
    const { store } = await withRequests('R-1', 'R-2', 'R-3', 'R-4');
    await store.bookings.place({ requestId: 'R-1', ...at(600, 30) }, 'Ina', 2);
    await store.bookings.place({ requestId: 'R-2', ...at(480, 30) }, 'Ina', 2);
    await store.bookings.place({ requestId: 'R-3', ...at(480, 30), date: '2026-12-09' }, 'Ina', 2);
    await store.bookings.place({ requestId: 'R-4', ...at(700, 30) }, 'Ina', 2);
    await store.bookings.cancel('R-4.1', 1, 'Ina', 3);
    const ids = (list: readonly { readonly id: string }[]) => list.map((b) => b.id);
    expect(ids(await store.bookings.listDay('2026-12-08'))).toEqual(['R-2.1', 'R-1.1']);
    expect(ids(await store.bookings.listBetween('2026-12-08', '2026-12-09'))).toEqual([
      'R-2.1',
      'R-1.1',
      'R-3.1',
    ]);
    const all = await store.bookings.listBetween('2026-12-08', '2026-12-09', {
      withCancelled: true,
    });
    expect(ids(all)).toEqual(['R-2.1', 'R-1.1', 'R-4.1', 'R-3.1']);
  });

  it.each([
    { ...at(480, 30), date: '2026-02-30' },
    { ...at(480, 30), date: '8.12.2026' },
    at(-5, 30),
    at(1440, 30),
    at(480, 0),
    at(480.5, 30),
    at(480, Number.NaN),
    { ...at(480, 30), scannerId: '' },
  ])('a place that is none throws before anything is written: %j', async (place) => {
    const { store } = await withRequests('R-1');
    const before = await store.history.lastSeq();
    await expect(
      store.bookings.place({ requestId: 'R-1', ...place }, 'Ina', 2),
    ).rejects.toMatchObject({
      problem: { code: 'booking-place' },
    });
    expect(await store.history.lastSeq()).toBe(before);
  });
});
