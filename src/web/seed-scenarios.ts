import { readText } from '../cli/files.js';
import { readScenarios } from '../interchange/index.js';
import type { PlanningGround } from '../planning/index.js';
import type { Department } from '../day/index.js';
import { ProblemError } from '../shared/index.js';
import type { Store } from '../store/index.js';
import { usualScenario } from '../throughput/index.js';

/**
 * Keeps the scenarios of a file, where none are kept yet.
 * @throws ProblemError when the file cannot be used
 */
export async function seedScenarios(
  path: string,
  {
    store,
    ground,
    department,
    now,
  }: {
    readonly store: Store;
    readonly ground: PlanningGround;
    readonly department: Department;
    readonly now: () => number;
  },
): Promise<void> {
  if ((await store.scenarios.list()).length > 0) return;
  const requests = (await store.requests.list()).map((r) => r.body);
  const { scenario } = usualScenario(department, requests);
  const read = readScenarios({ path, text: readText(path) }, scenario, {
    examIds: [...ground.library.exams.keys()],
  });
  if (read.kind === 'refused') throw new ProblemError(read.problems[0]!);
  for (const one of read.value) await store.scenarios.add(one, 'first start', now());
}
