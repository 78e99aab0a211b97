import { z } from 'zod';
import type { Sequence } from '../../sequences/index.js';
import type { Problem, Result } from '../../shared/index.js';
import { resolveSequence } from './read-sequences.js';
import { sequenceEntry } from './sequence-schema.js';
import { describe } from './yaml-source.js';

const field = z.union([z.literal(1.5), z.literal(3)]);

/**
 * One sequence as plain JSON at one field: the library's field names with `fieldT`; id, name,
 * weighting, plane, basis and source may be left out.
 */
export function readRawSequence(value: unknown): Result<Sequence> {
  if (value === null || typeof value !== 'object' || Array.isArray(value)) {
    return refused(
      'sequence',
      describe(value),
      'one JSON object',
      'Write { "fieldT": 3, "family": ... }.',
    );
  }
  const { fieldT = 1.5, ...rest } = value as Record<string, unknown>;
  const at = field.safeParse(fieldT);
  if (!at.success)
    return refused(
      'sequence, field fieldT',
      describe(fieldT),
      '1.5 or 3',
      'Give the field in tesla.',
    );
  const entry = sequenceEntry.safeParse({
    id: 'raw',
    name: 'given sequence',
    weighting: 'T2',
    plane: 'axial',
    basis: 'assumption',
    source: 'given on the command line',
    ...rest,
    at: { [String(at.data)]: {} },
  });
  if (!entry.success) {
    return {
      kind: 'refused',
      problems: entry.error.issues.map((issue) => ({
        code: 'sequence-value',
        thing: `sequence, field ${issue.path.map(String).join('.') || '(the whole)'}`,
        value: describe(
          issue.path.reduce<unknown>(
            (v, k) => (v as Record<PropertyKey, unknown> | undefined)?.[k],
            value,
          ),
        ),
        limit: issue.message,
        wayOut: 'Correct the value.',
      })),
    };
  }
  return resolveSequence(entry.data, at.data);
}

function refused(thing: string, value: string, limit: string, wayOut: string): Result<never> {
  const problem: Problem = { code: 'sequence-value', thing, value, limit, wayOut };
  return { kind: 'refused', problems: [problem] };
}
