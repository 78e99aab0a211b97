import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { describe, expect, it } from 'vitest';
import { MonthDesk } from '../../src/throughput/pool/month-desk.js';
import { runScenarios } from '../../src/throughput/pool/run-scenarios.js';
import { compiledWorker } from './compiled-worker.js';
import { department, ground, requests, usual } from './ground.js';

const short = { ...usual, months: 2, daysAMonth: 5 };
const pair = [short, { ...short, name: 'With a pause', bufferMin: 5 }];
const few = requests.slice(0, 8);
const workerFile = compiledWorker();
const { library } = ground;
const asked = { chance: 0.9, lateCost: 3, idleCost: 1, quickLooks: false };

describe('the month in a thread of its own', () => {
  it('gives what the same months give without it, and says how far it is', async () => {
    const desk = new MonthDesk({ library, threads: 2, workerFile });
    const planned: number[] = [];
    const months: number[] = [];
    const [there, here] = await Promise.all([
      desk.compare(pair, few, {
        onPlanned: (done) => planned.push(done),
        onMonth: (done, of) => months.push(done / of),
      }),
      runScenarios(pair, few, ground, { threads: 1, workerFile }),
    ]);
    expect(there).toEqual(here);
    expect(planned.length).toBeGreaterThanOrEqual(few.length);
    expect(months).toEqual([0.25, 0.5, 0.75, 1]);
  });

  it('answers two questions at once, each with its own', async () => {
    const desk = new MonthDesk({ library, threads: 1, workerFile });
    const [compared, rows] = await Promise.all([
      desk.compare([short], few),
      desk.advise(few, department.scanners, asked),
    ]);
    expect(compared.scenarios[0]!.months).toHaveLength(2);
    expect(rows.reduce((sum, r) => sum + r.kinds, 0)).toBe(few.length);
  });

  it('stops while it plans, and before it began', async () => {
    const desk = new MonthDesk({ library, threads: 1, workerFile });
    const stop = new AbortController();
    const stopped = await desk.compare(pair, requests, {
      signal: stop.signal,
      onPlanned: (done) => done > 0 && stop.abort(),
    });
    expect(stopped).toMatchObject({ stopped: true, scenarios: [] });
    expect(await desk.advise(few, department.scanners, asked, { signal: stop.signal })).toEqual([]);
  });

  it('a thread that breaks is told to whoever waits, and the next question begins a new one', async () => {
    const marker = join(mkdtempSync(join(tmpdir(), 'month-broken-')), 'broken.mjs');
    writeFileSync(
      marker,
      `import { parentPort } from 'node:worker_threads';
       parentPort.on('message', ({ kind, id }) => {
         if (kind === 'compare') throw new Error('out of paper');
         parentPort.postMessage({ kind: 'done', id, value: [] });
       });`,
    );
    const desk = new MonthDesk({ library, threads: 1, workerFile: pathToFileURL(marker) });
    await expect(desk.compare([short], few)).rejects.toThrow('out of paper');
    expect(await desk.advise(few, department.scanners, asked)).toEqual([]);
  });
});
