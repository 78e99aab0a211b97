import { z } from 'zod';
import type { Scanner } from '../../day/index.js';
import type { Problem, Result } from '../../shared/index.js';
import { checkScenario, type Scenario } from '../../throughput/index.js';
import { scannerEntry } from '../department/read-department.js';
import { parseYaml, schemaProblems, type LibraryFile } from '../library/yaml-source.js';
import { scenarioFields } from './scenario-schema.js';

/** Scanners by the department's ids, or a new one described in full. */
const scanners = z.array(z.union([z.string(), scannerEntry])).min(1, 'at least one scanner');

const { cutShortAfterMin, ...fields } = scenarioFields;
const some = z
  .strictObject({
    ...fields,
    scanners,
    /** Minutes, or `never`. */
    cutShortAfterMin: z.union([cutShortAfterMin, z.literal('never')]),
  })
  .partial();

const scenarioFile = some.extend({
  scenarios: z
    .array(some.extend({ name: z.string().min(1) }))
    .min(1)
    .max(6),
});

/**
 * Scenarios from a text file (YAML or JSON). The file holds only what differs from the department as it is: what stands at the
 * top counts for every scenario, what stands in one for that one alone.
 */
export function readScenarios(
  file: LibraryFile,
  usual: Scenario,
  known: { readonly examIds: readonly string[] },
): Result<readonly Scenario[]> {
  const source = parseYaml(file);
  if (source.kind === 'refused') return source;
  const parsed = scenarioFile.safeParse(source.value.value);
  if (!parsed.success) {
    return {
      kind: 'refused',
      problems: schemaProblems(parsed.error, source.value, source.value.value, 'scenarios'),
    };
  }
  const { scenarios, ...shared } = parsed.data;
  const problems: Problem[] = [];
  const read = scenarios.map((own): Scenario => {
    const { scanners: wanted, cutShortAfterMin: cut, ...rest } = { ...shared, ...own };
    const { cutShortAfterMin: usualCut, ...start } = usual;
    const limit = cut ?? usualCut;
    const scenario: Scenario = {
      ...start,
      ...withoutGaps(rest),
      ...(limit === undefined || limit === 'never' ? {} : { cutShortAfterMin: limit }),
      scanners:
        wanted === undefined ? usual.scanners : found(wanted, usual.scanners, own.name, problems),
    };
    for (const { problem } of checkScenario(scenario, known))
      problems.push({ ...problem, thing: `${file.path}, "${scenario.name}", ${problem.thing}` });
    return scenario;
  });
  return problems.length > 0 ? { kind: 'refused', problems } : { kind: 'ok', value: read };
}

function found(
  wanted: z.infer<typeof scanners>,
  own: readonly Scanner[],
  scenario: string,
  problems: Problem[],
): readonly Scanner[] {
  return wanted.flatMap((one): readonly Scanner[] => {
    if (typeof one !== 'string') return [one];
    const known = own.find((s) => s.id === one);
    if (known !== undefined) return [known];
    problems.push({
      code: 'scenario-scanner',
      thing: `"${scenario}", field scanners`,
      value: `"${one}"`,
      limit: `the department has: ${own.map((s) => s.id).join(', ')}`,
      wayOut: 'Name one of these, or describe the new scanner in full.',
    });
    return [];
  });
}

/** Fields that were left out must not stand there as undefined. */
function withoutGaps<T extends object>(fields: T): { [K in keyof T]: Exclude<T[K], undefined> } {
  return Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== undefined)) as {
    [K in keyof T]: Exclude<T[K], undefined>;
  };
}
