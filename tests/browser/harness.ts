import { existsSync, mkdtempSync, readdirSync } from 'node:fs';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { build } from 'esbuild';
import { chromium, type Browser, type BrowserContextOptions, type Page } from 'playwright-core';
import { openDepartment, openGround, openRequests } from '../../src/cli/ground.js';
import { demoFolder, projectFolder } from '../../src/cli/files.js';
import { linearSolver } from '../../src/planning/index.js';
import { openStore, type Store } from '../../src/store/index.js';
import { compiledWorker } from '../throughput/compiled-worker.js';
import { createApp } from '../../src/web/app.js';
import { seedDepartment } from '../../src/web/seed.js';

/** Where Debian puts its browser; another can be named. Without one the browser tests are skipped, except in CI. */
const candidates = [
  process.env['STILLSPAN_CHROMIUM'],
  '/usr/bin/chromium',
  '/usr/bin/chromium-browser',
  '/usr/bin/google-chrome',
];
export const browserPath = candidates.find((path) => path !== undefined && existsSync(path));
if (browserPath === undefined && process.env['CI'] === 'true')
  throw new Error('no chromium for the browser tests');

export interface Site {
  readonly url: string;
  readonly store: Store;
  readonly close: () => Promise<void>;
}

/** The whole application over a database in memory, filled with the demo department, on a free port of this machine. */
export async function openSite(
  options: {
    readonly file?: string;
    readonly seed?: boolean;
    readonly port?: number;
    readonly now?: () => number;
  } = {},
): Promise<Site> {
  const now = options.now ?? (() => Date.now());
  const client = mkdtempSync(join(tmpdir(), 'stillspan-client-'));
  await build({
    entryPoints: readdirSync(join(projectFolder, 'src/web/client')).map((name) =>
      join(projectFolder, 'src/web/client', name),
    ),
    bundle: true,
    format: 'esm',
    outdir: client,
    logLevel: 'error',
  });
  const { ground } = openGround();
  const department = openDepartment();
  const solver = linearSolver({ wallClockMs: 150 });
  const store = await openStore({ kind: 'sqlite', file: options.file ?? ':memory:' });
  if (options.seed !== false) {
    await seedDepartment(openRequests(join(demoFolder, 'requests.csv')).requests, {
      store,
      ground,
      department,
      solver,
      now,
    });
  }
  const app = createApp({
    store,
    ground,
    department,
    solver,
    now,
    folders: {
      views: join(projectFolder, 'views'),
      assets: join(projectFolder, 'src/web/assets'),
      client,
    },
    month: { threads: 1, workerFile: compiledWorker() },
    log: (line, detail) => process.stderr.write(`${line} ${JSON.stringify(detail)}\n`),
  });
  const server = app.listen(options.port ?? 0, '127.0.0.1');
  await new Promise((resolve) => server.once('listening', resolve));
  return {
    url: `http://127.0.0.1:${(server.address() as AddressInfo).port}`,
    store,
    close: async () => {
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
      await solver.close();
      await store.close();
    },
  };
}

export function openBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: browserPath ?? '',
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  });
}

/** A fresh reader: own cookies, own window. Faults in the page's script fail the test that caused them. */
export async function openPage(
  browser: Browser,
  options: BrowserContextOptions = {},
): Promise<Page & { readonly faults: string[] }> {
  const context = await browser.newContext({ viewport: { width: 1280, height: 900 }, ...options });
  const page = (await context.newPage()) as Page & { faults: string[] };
  page.faults = [];
  page.on('pageerror', (error) => page.faults.push(error.message));
  page.on('console', (message) => {
    if (message.type() === 'error') page.faults.push(message.text());
  });
  return page;
}
