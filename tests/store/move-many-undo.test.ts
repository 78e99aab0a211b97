/** Undo of several bookings moved at once. The rule is the project's own: all of them go back together, or none. */
import { expect, it } from 'vitest';
import { expectWhole } from './check-whole.js';
import { at, expectKind, onEveryStore } from './ground.js';
import { board, bookThree, move } from './three-booked.js';

onEveryStore('undo of several bookings moved at once', (kind) => {
  const threeBooked = () => bookThree(kind);

  it('undo puts a swap back as a whole, with the plans it had, and then goes one step further back', async () => {
    const fresh = await threeBooked();
    const { store, database } = fresh;
    await store.bookings.move('R-3.1', 1, { startMin: 600 }, 'Ina', 3);
    await store.bookings.moveMany(
      [
        { ...move(1, 510), to: { startMin: 510, slotMin: 20, plan: { short: true } } },
        move(2, 480),
      ],
      'Ina',
      4,
    );
    const undone = expectKind(await store.history.undoLast('Ina', 5), 'undone');
    expect(undone.what).toContain('R-1 moved');
    expect(undone.what).toContain('R-2 moved');
    expect(await board(fresh)).toEqual({ 'R-1': 480, 'R-2': 510, 'R-3': 600 });
    expect(await store.bookings.get('R-1.1')).toMatchObject({ slotMin: 30, plan: { n: 0 } });
    await expectWhole(database);
    expect(expectKind(await store.history.undoLast('Ina', 6), 'undone').what).toBe('R-3 moved');
    expect(await board(fresh)).toEqual({ 'R-1': 480, 'R-2': 510, 'R-3': 540 });
    expectKind(await store.history.undoLast('Ina', 7), 'refused');
    await expectWhole(database);
  });

  it('undo takes the emergency off again and gives back the place of the one it pushed off', async () => {
    const fresh = await threeBooked();
    const { store, database } = fresh;
    await store.bookings.moveMany(
      [{ id: 'R-1.1', version: 1, cancel: true }, { place: { requestId: 'R-4', ...at(480, 30) } }],
      'Ina',
      3,
    );
    expectKind(await store.history.undoLast('Ina', 4), 'undone');
    expect(await board(fresh)).toEqual({ 'R-1': 480, 'R-2': 510, 'R-3': 540 });
    expect((await store.requests.get('R-4'))?.status).toBe('waiting');
    await expectWhole(database);
  });

  it('undo of a joint change is refused whole when one old place is taken or one booking was changed since', async () => {
    const fresh = await threeBooked();
    const { store, database } = fresh;
    await store.bookings.moveMany([move(1, 600), move(2, 640)], 'Ina', 3);
    await store.bookings.place({ requestId: 'R-5', ...at(515, 20) }, 'Jo', 4);
    const taken = expectKind(await store.history.undoLast('Ina', 5), 'refused');
    expect(taken.why).toContain('R-5');
    expect(await board(fresh)).toMatchObject({ 'R-1': 600, 'R-2': 640 });
    expectKind(await store.history.undoLast('Jo', 6), 'undone');
    await store.bookings.move('R-1.1', 2, { startMin: 700 }, 'Jo', 7);
    const changed = expectKind(await store.history.undoLast('Ina', 8), 'refused');
    expect(changed.why).toContain('Jo');
    expect(await board(fresh)).toMatchObject({ 'R-1': 700, 'R-2': 640 });
    await expectWhole(database);
  });
});
