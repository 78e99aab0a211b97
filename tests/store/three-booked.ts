import type { ManyChange } from '../../src/store/index.js';
import { at, day, examRequest, freshStore, type Fresh, type StoreKind } from './ground.js';

/** R-1 at 08:00, R-2 at 08:30, R-3 at 09:00, half an hour each; wait. */
export async function bookThree(kind: StoreKind): Promise<Fresh> {
  const fresh = await freshStore(kind);
  for (const n of [1, 2, 3, 4, 5]) await fresh.store.requests.add(examRequest(`R-${n}`), 'Ina', 1);
  for (const [n, start] of [480, 510, 540].entries()) {
    const place = { requestId: `R-${n + 1}`, ...at(start, 30), plan: { n } };
    await fresh.store.bookings.place(place, 'Jo', 2);
  }
  return fresh;
}

export const move = (n: number, startMin: number, version = 1): ManyChange => ({
  ...{ id: `R-${n}.1`, version, to: { startMin } },
});

/** Starts of the day by request. */
export const board = async ({ store }: Fresh) =>
  Object.fromEntries((await store.bookings.listDay(day)).map((b) => [b.requestId, b.startMin]));
