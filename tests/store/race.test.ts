/** Fifty at once want one gap: whoever asks, however they are connected, one gets it. Holds for any right store. */
import { setTimeout as wait } from 'node:timers/promises';
import { expect, it } from 'vitest';
import { expectWhole } from './check-whole.js';
import { allItSays, childProgram, firstWord } from './child-process.js';
import { at, day, examRequest, freshStore, onEveryStore, openAgain, type Fresh } from './ground.js';

const attempts = 50;
const requestIds = Array.from({ length: attempts }, (_, n) => `R-${n + 1}`);

async function fiftyRequests(fresh: Fresh): Promise<Fresh> {
  const requests = requestIds.map((id) => examRequest(id));
  await fresh.store.seed({ requests, bookings: [] }, 'Ina', 1);
  return fresh;
}

async function expectOneWinner({ store, database }: Fresh, kinds: readonly (string | undefined)[]) {
  expect(kinds.filter((k) => k === 'placed')).toHaveLength(1);
  expect(kinds.filter((k) => k === 'taken')).toHaveLength(attempts - 1);
  expect(await store.bookings.listDay(day)).toHaveLength(1);
  expect(await store.requests.list({ status: 'booked' })).toHaveLength(1);
  await expectWhole(database);
}

onEveryStore('fifty at once in one process', (kind) => {
  it('over one connection: one is placed, 49 are told who has it', async () => {
    const fresh = await fiftyRequests(await freshStore(kind));
    const outcomes = await Promise.all(
      requestIds.map((requestId) =>
        fresh.store.bookings.place({ requestId, ...at(480, 30) }, 'Ina', 2),
      ),
    );
    await expectOneWinner(
      fresh,
      outcomes.map((o) => o.kind),
    );
    const [winner] = await fresh.store.bookings.listDay(day);
    for (const o of outcomes) if (o.kind === 'taken') expect(o.by.bookingId).toBe(winner?.id);
  });
});

onEveryStore(
  'fifty at once from many sides',
  (kind) => {
    it('a write that has to wait for another writer is made once that one is done', async () => {
      const fresh = await fiftyRequests(await freshStore(kind));
      const other = await openAgain(fresh.settings);
      const place = fresh.store.bookings.place;
      let waiting: ReturnType<typeof place> | undefined;
      await other.database.kysely.transaction().execute(async (transaction) => {
        await other.database.lockForWriting(transaction);
        waiting = place({ requestId: 'R-1', ...at(480, 30) }, 'Ina', 2);
        await wait(300);
      });
      expect((await waiting)?.kind).toBe('placed');
      await expectWhole(fresh.database);
    });

    it('over ten connections of one process', async () => {
      const fresh = await fiftyRequests(await freshStore(kind));
      const more = await Promise.all(Array.from({ length: 10 }, () => openAgain(fresh.settings)));
      const outcomes = await Promise.all(
        requestIds.map((requestId, n) =>
          more[n % more.length]!.store.bookings.place({ requestId, ...at(480, 30) }, 'Ina', 2),
        ),
      );
      await expectOneWinner(
        fresh,
        outcomes.map((o) => o.kind),
      );
    });

    it('from five processes with two connections and ten attempts each', async () => {
      const fresh = await fiftyRequests(await freshStore(kind));
      const start = childProgram('place-at-once');
      const children = [0, 10, 20, 30, 40].map((n) =>
        start({
          settings: fresh.settings,
          requestIds: requestIds.slice(n, n + 10),
          connections: 2,
        }),
      );
      await Promise.all(children.map(firstWord));
      const said = children.map(allItSays);
      for (const child of children) child.stdin.write('go\n');
      const kinds = (await Promise.all(said)).flatMap(
        (text) => JSON.parse(text.split('\n')[1] ?? '[]') as string[],
      );
      await expectOneWinner(fresh, kinds);
    });
  },
  ['sqlite file', 'postgres'],
);
