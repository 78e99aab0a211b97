import { rmSync } from 'node:fs';
import { spawn, type ChildProcessByStdio } from 'node:child_process';
import type { Readable, Writable } from 'node:stream';
import { fileURLToPath } from 'node:url';
import { buildSync } from 'esbuild';
import { afterAll } from 'vitest';

export type Child = ChildProcessByStdio<Writable, Readable, null>;

const here = new URL('./children/', import.meta.url);
/** Inside the project, so that the packages are found from there. */
const built = new URL('../../node_modules/.cache/stillspan-tests/', import.meta.url);

let outfiles: string[] = [];
afterAll(() => {
  for (const file of outfiles) rmSync(file, { force: true });
  outfiles = [];
});

/** Makes a program of `children/` ready to be started many times quickly; gives what starts it with one JSON argument. */
export function childProgram(name: string): (argument: unknown) => Child {
  const outfile = fileURLToPath(new URL(`${name}-${process.pid}.mjs`, built));
  outfiles.push(outfile);
  buildSync({
    entryPoints: [fileURLToPath(new URL(`${name}.ts`, here))],
    outfile,
    bundle: true,
    packages: 'external',
    platform: 'node',
    format: 'esm',
    target: 'node20',
  });
  return (argument) =>
    spawn(process.execPath, [outfile, JSON.stringify(argument)], {
      stdio: ['pipe', 'pipe', 'inherit'],
    });
}

/** Everything it says until it ends, by itself or not. */
export async function allItSays(child: Child): Promise<string> {
  let text = '';
  for await (const chunk of child.stdout.setEncoding('utf8')) text += chunk as string;
  return text;
}

export const firstWord = (child: Child) =>
  new Promise<void>((heard, failed) => {
    child.stdout.once('readable', () => heard());
    child.once('exit', (code) => failed(new Error(`ended with ${code} before it said a word`)));
  });
