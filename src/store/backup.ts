import { existsSync } from 'node:fs';
import { mkdir, open, rename, rm } from 'node:fs/promises';
import { dirname, resolve } from 'node:path';
import type { Database } from './database.js';
import { refused, type Refused } from './outcomes.js';
import { retried } from './retried.js';

export type BackupOutcome = { readonly kind: 'written'; readonly path: string } | Refused;

/**
 * A whole copy of a SQLite store in one new file, while others read and write. It has its name only
 * once it is complete and on the disk.
 */
export async function backUp(database: Database, path: string): Promise<BackupOutcome> {
  const { copyInto } = database;
  if (copyInto === undefined) {
    return refused("this store is kept by a database server; use the server's own backup");
  }
  const target = resolve(path);
  if (existsSync(target)) return refused(`${target} exists; a backup never replaces a file`);
  await mkdir(dirname(target), { recursive: true });
  const unfinished = `${target}.unfinished`;
  await rm(unfinished, { force: true });
  // An empty file of our own first, so that nobody but its owner can read the copy.
  await (await open(unfinished, 'wx', 0o600)).close();
  await retried(() => copyInto(unfinished));
  const file = await open(unfinished, 'r+');
  await file.sync();
  await file.close();
  await rename(unfinished, target);
  return { kind: 'written', path: target };
}
