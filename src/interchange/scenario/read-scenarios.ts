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
  const source = parsed(file);
  if (source.kind === 'refused') return source;
  const { value, lineOf } = source.value;
  const read = scenarioFile.safeParse(value);
  if (!read.success) {
    return {
      kind: 'refused',
      problems: schemaProblems(read.error, source.value, value, 'scenarios').map((problem) => ({
        ...problem,
        wayOut: 'Correct it in the file.',
      })),
    };
  }
  const { scenarios, ...shared } = read.data;
  const problems: Problem[] = [];
  const found = scenarios.map((own, n): Scenario => {
    /** Where a field stands: with the scenario itself, at the top for all, or else where the scenario begins. */
    const place = (field: string) => {
      const at = /^hours /.test(field) ? 'scanners' : /^slot /.test(field) ? 'slots' : field;
      const line = lineOf(at in own || !(at in shared) ? ['scenarios', n, at] : [at]);
      return `${file.path}${line === undefined ? '' : `, line ${line}`}, scenario "${own.name}", field ${field}`;
    };
    const { scanners: wanted, cutShortAfterMin: cut, ...rest } = { ...shared, ...own };
    const { cutShortAfterMin: usualCut, ...start } = usual;
    const limit = cut ?? usualCut;
    const scenario: Scenario = {
      ...start,
      ...withoutGaps(rest),
      ...(limit === undefined || limit === 'never' ? {} : { cutShortAfterMin: limit }),
      scanners:
        wanted === undefined
          ? usual.scanners
          : scannersOf(wanted, usual.scanners, place('scanners'), problems),
    };
    if (scenarios.findIndex((s) => s.name === own.name) < n)
      problems.push({
        code: 'scenario-name',
        thing: place('name'),
        value: 'the name of an earlier one',
        limit: 'each scenario has a name of its own',
        wayOut: 'Give it another name.',
      });
    for (const { field, problem } of checkScenario(scenario, known))
      // Scanners that were not found are told of already.
      if (wanted === undefined || field !== 'scanners' || scenario.scanners.length > 0)
        problems.push({ ...problem, thing: place(field) });
    return scenario;
  });
  return problems.length > 0 ? { kind: 'refused', problems } : { kind: 'ok', value: found };
}

/** Text that is read into endless aliases is refused like any other that is no scenario file. */
function parsed(file: LibraryFile): ReturnType<typeof parseYaml> {
  try {
    return parseYaml(file);
  } catch (error) {
    const problem: Problem = {
      code: 'scenario-syntax',
      thing: file.path,
      value: error instanceof Error ? error.message : 'unreadable',
      limit: 'the file must be valid YAML or JSON',
      wayOut: 'Write it without aliases; data-demo/scenarios.yaml shows how.',
    };
    return { kind: 'refused', problems: [problem] };
  }
}

function scannersOf(
  wanted: z.infer<typeof scanners>,
  own: readonly Scanner[],
  place: string,
  problems: Problem[],
): readonly Scanner[] {
  return wanted.flatMap((one): readonly Scanner[] => {
    if (typeof one !== 'string') return [one];
    const known = own.find((s) => s.id === one);
    if (known !== undefined) return [known];
    problems.push({
      code: 'scenario-scanner',
      thing: place,
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
