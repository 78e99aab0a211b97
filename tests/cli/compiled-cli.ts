import { execFile } from 'node:child_process';
import { mkdtempSync, readdirSync, symlinkSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { build } from 'esbuild';
import { projectFolder } from '../../src/cli/files.js';

export interface Ran {
  readonly code: number;
  readonly out: string;
  readonly err: string;
}

/** The command line, compiled as `npm run build` does it, in a folder of its own; threads need their compiled files. */
export async function compiledCli(): Promise<(args: readonly string[]) => Promise<Ran>> {
  const folder = mkdtempSync(join(tmpdir(), 'stillspan-compiled-'));
  for (const name of ['node_modules', 'src', 'data-demo', 'package.json'])
    symlinkSync(join(projectFolder, name), join(folder, name));
  const source = join(projectFolder, 'src');
  const files = readdirSync(source, { recursive: true, encoding: 'utf8' });
  await build({
    entryPoints: files
      .filter((name) => /\.(ts|mjs)$/.test(name) && !name.startsWith('web'))
      .map((name) => join(source, name)),
    outdir: join(folder, 'dist'),
    outbase: source,
    format: 'esm',
    platform: 'node',
    target: 'node20',
    loader: { '.mjs': 'copy' },
    logLevel: 'error',
  });
  return (args) =>
    new Promise((resolve) => {
      execFile(
        process.execPath,
        [join(folder, 'dist/cli/stillspan.js'), ...args],
        { cwd: folder, env: { ...process.env, NO_COLOR: '1' }, maxBuffer: 64e6 },
        (error, out, err) =>
          resolve({ code: typeof error?.code === 'number' ? error.code : error ? 1 : 0, out, err }),
      );
    });
}
