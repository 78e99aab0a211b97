import { ProblemError } from '../shared/index.js';
import type { FieldT } from './field.js';
import { bodyTissues } from './tissues-body.js';
import { headTissues } from './tissues-head.js';
import type { Tissue, TissueRow } from './tissue-row.js';
import { jointAndSpineTissues } from './tissues-joint-and-spine.js';

export type { Tissue } from './tissue-row.js';

const table: ReadonlyMap<string, Partial<Record<FieldT, Tissue>>> = new Map(
  [...headTissues, ...jointAndSpineTissues, ...bodyTissues].map((row) => [row.name, atFields(row)]),
);

/** Names of all tissues, in the order of the tables. */
export const tissueNames: readonly string[] = [...table.keys()];

/**
 * A tissue's values at a field.
 * @throws ProblemError for an unknown tissue, or one without a value at the field; it names both
 */
export function tissueAt(name: string, fieldT: FieldT): Tissue {
  const fields = table.get(name);
  if (fields === undefined) {
    throw new ProblemError({
      code: 'unknown-tissue',
      thing: `tissue at ${fieldT} T`,
      value: `"${name}"`,
      limit: `known tissues: ${tissueNames.join(', ')}`,
      wayOut: 'Use one of the known tissues.',
    });
  }
  const tissue = fields[fieldT];
  if (tissue === undefined) {
    throw new ProblemError({
      code: 'tissue-without-value',
      thing: `tissue "${name}"`,
      value: `no value at ${fieldT} T`,
      limit: `it has values at ${Object.keys(fields).join(' and ')} T`,
      wayOut: 'Use the field that has a value, or add one with its source to the tissue table.',
    });
  }
  return tissue;
}

function atFields(row: TissueRow): Partial<Record<FieldT, Tissue>> {
  const { name, protonDensity, adcMm2PerS, fatFraction, about } = row;
  const fields: Partial<Record<FieldT, Tissue>> = {};
  for (const fieldT of [1.5, 3] as const) {
    const at = row.at[fieldT];
    if (at === undefined) continue;
    fields[fieldT] = {
      name,
      protonDensity,
      ...(adcMm2PerS === undefined ? {} : { adcMm2PerS }),
      ...(fatFraction === undefined ? {} : { fatFraction }),
      ...at,
      source: `${at.source}; ${about}`,
    };
  }
  return fields;
}
