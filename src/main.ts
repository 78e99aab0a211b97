import { mkdirSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { dirname, join } from 'node:path';
import { pino } from 'pino';
import { demoFolder, projectFolder } from './cli/files.js';
import { openDepartment, openGround, openRequests } from './cli/ground.js';
import { print, printProblems } from './cli/output.js';
import { withRecords } from './cli/own-records.js';
import { linearSolver } from './planning/index.js';
import { openStore } from './store/index.js';
import { createApp } from './web/app.js';
import { seedScenarios } from './web/seed-scenarios.js';
import { seedDepartment } from './web/seed.js';

/** Everything the environment may say; nothing else reads it. */
const settings = {
  host: process.env['HOST'] ?? '127.0.0.1',
  port: Number(process.env['PORT'] ?? 4173),
  databaseUrl: process.env['DATABASE_URL'],
  file: process.env['STILLSPAN_FILE'] ?? join(projectFolder, '.data', 'stillspan.sqlite'),
  library: process.env['STILLSPAN_LIBRARY'],
  department: process.env['STILLSPAN_DEPARTMENT'],
};

const log = pino({ level: 'info' }, pino.destination(2));
const { ground: asWritten, problems } = openGround(settings.library);
printProblems(problems);
const department = openDepartment(settings.department);
const solver = linearSolver({ wallClockMs: 150 });
if (settings.databaseUrl === undefined) mkdirSync(dirname(settings.file), { recursive: true });
const store = await openStore(
  settings.databaseUrl === undefined
    ? { kind: 'sqlite', file: settings.file }
    : { kind: 'postgres', url: settings.databaseUrl },
);
const deps = {
  store,
  ground: withRecords(asWritten, await store.achieved.list()),
  writtenPolicy: asWritten.library.policy,
  department,
  solver,
  now: () => Date.now(),
};

if ((await store.requests.list()).length === 0 && settings.department === undefined) {
  print('First start: planning the demo department ...');
  const { requests, problems: unread } = openRequests(join(demoFolder, 'requests.csv'));
  printProblems(unread);
  const placed = await seedDepartment(requests, deps);
  await seedScenarios(join(demoFolder, 'scenarios.yaml'), deps);
  print(`${requests.length} requests planned, ${placed} of them on the board.`);
}

const app = createApp({
  ...deps,
  folders: {
    views: join(projectFolder, 'views'),
    assets: join(projectFolder, 'src/web/assets'),
    client: join(projectFolder, 'dist/web/client'),
  },
  month: { threads: Math.max(1, availableParallelism() - 1) },
  log: (line, detail) => log.error(detail ?? {}, line),
});
const server = app.listen(settings.port, settings.host, (error) => {
  if (error) {
    print(
      `Port ${settings.port} on ${settings.host} cannot be used (${error.message}). Set PORT to another number and start again.`,
    );
    process.exit(1);
  }
  print(`${department.name}\nOpen http://${settings.host}:${settings.port}/ - stop with Ctrl+C.`);
});

for (const signal of ['SIGINT', 'SIGTERM'] as const) {
  process.on(signal, () => {
    server.closeAllConnections();
    server.close(
      () => void Promise.all([solver.close(), store.close()]).then(() => process.exit(0)),
    );
  });
}
