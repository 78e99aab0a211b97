import { sql } from 'kysely';
import { expect, it } from 'vitest';
import { requestFor } from '../planning/ground.js';
import { at } from './ground-places.js';
import { freshStore, onEveryStore } from './ground.js';

const tap = (n: number, happening: Parameters<typeof JSON.stringify>[0] = { kind: 'clean' }) =>
  ({ tapId: `tap-id-${n}`, atS: n, happening }) as never;

// Holds for any right append-only log.
onEveryStore('the console log', (kind) => {
  async function placed() {
    const fresh = await freshStore(kind);
    await fresh.store.requests.add(requestFor('knee', { id: 'R-1' }), 'desk', 1);
    const outcome = await fresh.store.bookings.place(
      { requestId: 'R-1', ...at(540, 30) },
      'desk',
      1,
    );
    if (outcome.kind !== 'placed') throw new Error(outcome.kind);
    return { ...fresh, id: outcome.booking.id };
  }

  it('keeps taps in order and once, however often they are sent', async () => {
    const { store, id } = await placed();
    await store.consoleLog.append(id, [tap(1, { kind: 'entered' }), tap(2)], 'console', 2);
    const again = await store.consoleLog.append(
      id,
      [tap(2), tap(3, { kind: 'moved' })],
      'console',
      3,
    );
    expect(again.kind === 'kept' && again.events.map((e) => [e.seq, e.kind])).toEqual([
      [1, 'entered'],
      [2, 'clean'],
      [3, 'moved'],
    ]);
    expect(await store.consoleLog.list(id)).toHaveLength(3);
  });

  it('many at once: every tap is there once, numbered without a gap', async () => {
    const { store, id } = await placed();
    await Promise.all(
      Array.from({ length: 20 }, (_, n) =>
        store.consoleLog.append(id, [tap(n), tap(n + 1)], 'console', 2),
      ),
    );
    const events = await store.consoleLog.list(id);
    expect(events.map((e) => e.seq)).toEqual(Array.from({ length: 21 }, (_, n) => n + 1));
    expect(new Set(events.map((e) => e.atS)).size).toBe(21);
  });

  it('cannot be changed or emptied, not even past the program', async () => {
    const { store, database, id } = await placed();
    await store.consoleLog.append(id, [tap(1)], 'console', 2);
    await expect(sql`update console_tap set at_s = 99`.execute(database.kysely)).rejects.toThrow(
      'only added to',
    );
    await expect(sql`delete from console_tap`.execute(database.kysely)).rejects.toThrow(
      'only added to',
    );
  });

  it('refuses taps for an exam that is over or was never booked, and taps nobody can make', async () => {
    const { store, id } = await placed();
    expect((await store.consoleLog.append('nothing', [tap(1)], 'console', 2)).kind).toBe('refused');
    await expect(
      store.consoleLog.append(id, [tap(1, { kind: 'teleported' })], 'console', 2),
    ).rejects.toThrow();
    expect(await store.consoleLog.list(id)).toEqual([]);
    await store.bookings.cancel(id, 1, 'desk', 3);
    expect((await store.consoleLog.append(id, [tap(1)], 'console', 4)).kind).toBe('refused');
  });

  it("tells those who listen, and is not undone with the desk's last change", async () => {
    const { store, id } = await placed();
    const heard: number[] = [];
    store.onChange((seq) => heard.push(seq));
    await store.consoleLog.append(id, [tap(1)], 'desk', 2);
    expect(heard.length).toBe(1);
    const undone = await store.history.undoLast('desk', 3);
    expect(undone.kind).toBe('undone');
    expect(await store.consoleLog.list(id)).toHaveLength(1);
  });
});
