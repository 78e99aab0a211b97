import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { buildSync } from 'esbuild';
import { projectFolder } from '../../src/cli/files.js';

/** The simulation thread, compiled for a test run. */
export function compiledWorker(): URL {
  const outfile = join(mkdtempSync(join(tmpdir(), 'month-')), 'month-worker.mjs');
  buildSync({
    entryPoints: [join(projectFolder, 'src/throughput/pool/month-worker.ts')],
    bundle: true,
    platform: 'node',
    format: 'esm',
    outfile,
    logLevel: 'silent',
  });
  return pathToFileURL(outfile);
}
