/** A process of its own that opens connections, waits for the word, and asks for one gap many times at once. */
import { once } from 'node:events';
import { openStore, type StoreSettings } from '../../../src/store/index.js';
import { at } from '../ground-places.js';

const { settings, requestIds, connections } = JSON.parse(process.argv[2] ?? '') as {
  readonly settings: StoreSettings;
  readonly requestIds: readonly string[];
  readonly connections: number;
};
const stores = await Promise.all(Array.from({ length: connections }, () => openStore(settings)));
process.stdout.write('ready\n');
await once(process.stdin, 'data');
const kinds = await Promise.all(
  requestIds.map(async (requestId, n) => {
    const store = stores[n % stores.length];
    // Each asks for a slightly different piece; all of them meet at 08:25.
    const outcome = await store?.bookings.place(
      { requestId, ...at(480 + (n % 5) * 5, 30) },
      'Ina',
      2,
    );
    return outcome?.kind;
  }),
);
process.stdout.write(`${JSON.stringify(kinds)}\n`);
await Promise.all(stores.map((store) => store.close()));
process.exit(0);
