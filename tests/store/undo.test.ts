/** Undo. The rule is the project's own: put back as a new change, or refused with a reason. */
import { expect, it } from 'vitest';
import { expectWhole } from './check-whole.js';
import { at, examRequest, expectKind, freshStore, onEveryStore } from './ground.js';

onEveryStore('undo', (kind) => {
  const placed = async () => {
    const fresh = await freshStore(kind);
    for (const id of ['R-1', 'R-2']) await fresh.store.requests.add(examRequest(id), 'Ina', 1);
    await fresh.store.bookings.place(
      { requestId: 'R-1', ...at(480, 30), plan: { n: 1 } },
      'Ina',
      2,
    );
    return fresh;
  };

  it('puts a move back as a new change, with the plan it had', async () => {
    const { store, database } = await placed();
    await store.bookings.move('R-1.1', 1, { startMin: 600, slotMin: 45 }, 'Ina', 3);
    const undone = expectKind(await store.history.undoLast('Ina', 4), 'undone');
    expect(undone.what).toBe('R-1 moved');
    expect(undone.booking).toMatchObject({ ...at(480, 30), version: 3, plan: { n: 1 } });
    const lines = await store.history.of('booking', 'R-1.1');
    expect(lines.map((c) => c.action)).toEqual(['placed', 'moved', 'undone']);
    expect(lines[2]).toMatchObject({ who: 'Ina', atMs: 4, undoes: lines[1]?.seq });
    await expectWhole(database);
  });

  it('goes back step by step, down to the request waiting again, and then says there is nothing', async () => {
    const { store, database } = await placed();
    await store.bookings.resize('R-1.1', 1, { slotMin: 45 }, 'Ina', 3);
    expectKind(await store.history.undoLast('Ina', 4), 'undone');
    expectKind(await store.history.undoLast('Ina', 5), 'undone');
    expect((await store.requests.get('R-1'))?.status).toBe('waiting');
    expect(await store.bookings.listDay('2026-12-08')).toEqual([]);
    expectKind(await store.history.undoLast('Ina', 6), 'refused');
    await expectWhole(database);
  });

  it('brings a cancelled booking back', async () => {
    const { store, database } = await placed();
    await store.bookings.cancel('R-1.1', 1, 'Ina', 3);
    expectKind(await store.history.undoLast('Ina', 4), 'undone');
    expect(await store.bookings.ofRequest('R-1')).toMatchObject({
      status: 'booked',
      ...at(480, 30),
    });
    await expectWhole(database);
  });

  it("touches nobody else's change, and refuses when somebody changed the booking after", async () => {
    const { store } = await placed();
    expectKind(await store.history.undoLast('Jo', 3), 'refused');
    await store.bookings.move('R-1.1', 1, { startMin: 600 }, 'Jo', 4);
    const { why } = expectKind(await store.history.undoLast('Ina', 5), 'refused');
    expect(why).toContain('Jo');
    expect(await store.bookings.get('R-1.1')).toMatchObject({ startMin: 600, version: 2 });
    expectKind(await store.history.undoLast('Jo', 6), 'undone');
    expectKind(await store.history.undoLast('Ina', 7), 'undone');
  });

  it('refuses when the place went to another', async () => {
    const { store } = await placed();
    await store.bookings.cancel('R-1.1', 1, 'Ina', 3);
    await store.bookings.place({ requestId: 'R-2', ...at(490, 30) }, 'Jo', 4);
    const { why } = expectKind(await store.history.undoLast('Ina', 5), 'refused');
    expect(why).toContain('R-2');
    expect((await store.bookings.get('R-1.1'))?.status).toBe('cancelled');
  });

  it('refuses when the request has another place by now', async () => {
    const { store, database } = await placed();
    await store.bookings.cancel('R-1.1', 1, 'Ina', 3);
    await store.bookings.place({ requestId: 'R-1', ...at(700, 30) }, 'Jo', 4);
    expectKind(await store.history.undoLast('Ina', 5), 'refused');
    await expectWhole(database);
  });

  it('never takes back an exam whose answers are on record', async () => {
    const { store } = await placed();
    const answers = [{ questionId: 'a', name: 'A', grade: 'screening' }] as const;
    const exam = { bookingId: 'R-1.1', version: 1, answers, dueDate: '2026-12-20' };
    await store.owed.recordDone(exam, 'Ina', 3);
    expectKind(await store.history.undoLast('Ina', 4), 'refused');
    expect(await store.owed.list({ states: ['owed'] })).toHaveLength(1);
  });

  it('does not bring back a plan that was made from an older request', async () => {
    const { store } = await placed();
    await store.bookings.resize('R-1.1', 1, { slotMin: 45 }, 'Ina', 3);
    const body = examRequest('R-1', { slotS: 900 });
    expectKind(await store.requests.change('R-1', 2, { body }, 'Jo', 4), 'changed');
    const { booking } = expectKind(await store.history.undoLast('Ina', 5), 'undone');
    expect(booking).toMatchObject({ slotMin: 30, plan: null });
  });

  it('a plan kept later does not stand in the way, and does not outlive its slot', async () => {
    const { store } = await placed();
    await store.bookings.resize('R-1.1', 1, { slotMin: 45, plan: { n: 2 } }, 'Ina', 3);
    await store.bookings.keepPlan('R-1.1', 2, { n: 3 }, 'Jo', 4);
    const { booking } = expectKind(await store.history.undoLast('Ina', 5), 'undone');
    expect(booking).toMatchObject({ slotMin: 30, plan: { n: 1 } });
  });
});
