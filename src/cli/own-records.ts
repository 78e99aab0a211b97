import { existsSync } from 'node:fs';
import { join } from 'node:path';
import type { PlanningGround } from '../planning/index.js';
import { openStore } from '../store/index.js';
import { learn, withLearned, type AchievedRecord } from '../tolerance/index.js';
import { projectFolder } from './files.js';
import { openGround } from './ground.js';
import { printProblems } from './output.js';

/** Where the pages keep what is saved, unless they were started with another file. */
export const defaultStoreFile = join(projectFolder, '.data', 'stillspan.sqlite');

/** A store file's records of what patients achieved; undefined where there is no such file. */
export async function recordsIn(file: string): Promise<readonly AchievedRecord[] | undefined> {
  if (!existsSync(file)) return undefined;
  const store = await openStore({ kind: 'sqlite', file });
  try {
    return await store.achieved.list();
  } finally {
    await store.close();
  }
}

/** The ground with the site's own records in the place of the priors that signed entries of its policy switch on. */
export function withRecords(
  ground: PlanningGround,
  records: readonly AchievedRecord[],
): PlanningGround {
  const { library } = ground;
  const policy = withLearned(library.policy, learn(records, library.policy));
  return policy === library.policy ? ground : { ...ground, library: { ...library, policy } };
}

/** The library on disk, planned with as the pages would: the store is looked into only where an entry is signed. */
export async function openPlanningGround(folder?: string): Promise<PlanningGround> {
  const { ground } = openGround(folder);
  const { entries } = ground.library.policy.learning;
  if (entries.length === 0) return ground;
  const records = await recordsIn(defaultStoreFile);
  if (records !== undefined) return withRecords(ground, records);
  printProblems([
    {
      code: 'records-none',
      thing: `${entries.length} signed learning entry or entries of the policy`,
      value: `there is no file ${defaultStoreFile}`,
      limit: 'they put the records kept there in the place of a prior',
      wayOut: 'Until there is one, the priors are planned with.',
    },
  ]);
  return ground;
}
