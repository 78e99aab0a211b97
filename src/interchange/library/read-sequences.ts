import type { FieldT } from '../../physics/index.js';
import type { Problem, Result } from '../../shared/index.js';
import { encodingOf, type Sequence } from '../../sequences/index.js';
import { ProblemError } from '../../shared/index.js';
import { defaultReferenceLines, sequenceDefaults } from './sequence-defaults.js';
import { sequenceEntry, sequenceFile, type SequenceEntry } from './sequence-schema.js';
import { describe, schemaProblems, type YamlSource } from './yaml-source.js';

/** What every sequence must have been told, by itself or per field. */
const required = [
  'repetitionTimeMs',
  'echoTimeMs',
  'matrixFrequency',
  'matrixPhase',
  'fovFrequencyMm',
  'fovPhaseMm',
  'slices',
  'sliceThicknessMm',
  'readoutMs',
] as const;

/**
 * One entry at one field, defaults filled in. Refused with every missing value named, or with the
 * encoding's own complaint where the values do not fit together.
 */
export function resolveSequence(entry: SequenceEntry, fieldT: FieldT): Result<Sequence> {
  const { at, id, name, family, weighting, plane, basis, source, ...common } = entry;
  const merged: Record<string, unknown> = {
    ...sequenceDefaults,
    ...withoutUndefined(common),
    ...withoutUndefined((fieldT === 3 ? at['3'] : at['1.5']) ?? {}),
  };
  const where = `sequence "${id}" at ${fieldT} T`;
  const problems: Problem[] = required
    .filter((field) => merged[field] === undefined)
    .map((field) => ({
      code: 'sequence-incomplete',
      thing: `${where}, field ${field}`,
      value: 'missing',
      limit: 'every sequence needs it',
      wayOut: `Add ${field} to the entry, or under at."${fieldT}".`,
    }));
  merged['echoSpacingMs'] ??= merged['echoTimeMs'];
  merged['referenceLines'] ??=
    merged['parallelReductionFactorInPlane'] === 1 ? 0 : defaultReferenceLines;
  if (problems.length > 0) return { kind: 'refused', problems };
  const sequence = {
    ...merged,
    id,
    name,
    family,
    weighting,
    plane,
    basis,
    source,
    fieldT,
  } as unknown as Sequence;
  try {
    encodingOf(sequence);
  } catch (error) {
    if (!(error instanceof ProblemError)) throw error;
    return {
      kind: 'refused',
      problems: [{ ...error.problem, thing: `${where}, ${error.problem.thing}` }],
    };
  }
  return { kind: 'ok', value: sequence };
}

const withoutUndefined = (part: Record<string, unknown>) =>
  Object.fromEntries(Object.entries(part).filter(([, value]) => value !== undefined));

/** Adds a file's sequences to the map; what is wrong is reported and left out, the rest is kept. */
export function readSequences(
  source: YamlSource,
  into: Map<string, Map<FieldT, Sequence>>,
): Problem[] {
  const file = sequenceFile.safeParse(source.value);
  if (!file.success) return schemaProblems(file.error, source, source.value, 'file');
  const problems: Problem[] = [];
  file.data.sequences.forEach((raw, index) => {
    const name = describe((raw as { id?: unknown } | null)?.id ?? `number ${index + 1}`);
    const parsed = sequenceEntry.safeParse(raw);
    if (!parsed.success) {
      const path = ['sequences', index];
      problems.push(...schemaProblems(parsed.error, source, raw, `sequence ${name}`, path));
      return;
    }
    if (into.has(parsed.data.id)) {
      problems.push({
        code: 'library-duplicate',
        thing: `${source.path}, sequence ${name}`,
        value: 'the id is used twice',
        limit: 'ids are unique over all files',
        wayOut: 'Give one of the two another id.',
      });
      return;
    }
    const atFields = new Map<FieldT, Sequence>();
    for (const fieldT of [1.5, 3] as const) {
      if (parsed.data.at[fieldT === 3 ? '3' : '1.5'] === undefined) continue;
      const resolved = resolveSequence(parsed.data, fieldT);
      if (resolved.kind === 'ok') atFields.set(fieldT, resolved.value);
      else {
        const line = source.lineOf(['sequences', index]);
        const place = line === undefined ? source.path : `${source.path}, line ${line}`;
        problems.push(...resolved.problems.map((p) => ({ ...p, thing: `${place}, ${p.thing}` })));
      }
    }
    if (atFields.size > 0) into.set(parsed.data.id, atFields);
  });
  return problems;
}
