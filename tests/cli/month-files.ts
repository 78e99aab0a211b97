import { mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { demoFolder } from '../../src/cli/files.js';

const folder = mkdtempSync(join(tmpdir(), 'stillspan-month-'));
export function file(name: string, text: string): string {
  const path = join(folder, name);
  writeFileSync(path, text);
  return path;
}
/** The demo's first dozen requests: a mix that is planned in a moment. */
export const few = file(
  'few.csv',
  readFileSync(join(demoFolder, 'requests.csv'), 'utf8').split('\n').slice(0, 13).join('\n'),
);
export const joined = (text: string) => text.replace(/\s+/g, ' ');

/** Sentences and cells that speak of looks or grades below diagnostic say so; names that somebody gave are theirs. */
export function unspoken(text: string, names: readonly string[]): string[] {
  const own = names.reduce((rest, name) => rest.replaceAll(name, ''), joined(text));
  return own
    .split(/(?<=[.;:%])\s|\n|","|_/)
    .filter((part) => /quick look|screening/i.test(part) && !/not diagnostic/i.test(part));
}
