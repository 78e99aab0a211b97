import type { Sequence } from '../../sequences/index.js';
import { inWords } from './value-words.js';

export interface ParameterRow {
  readonly what: string;
  readonly value: string;
}

/** Said elsewhere on the page. */
const elsewhere = new Set(['id', 'name', 'source', 'basis', 'fieldT']);

/** Every parameter of a sequence in words, with its unit. */
export function parameterRows(sequence: Sequence): readonly ParameterRow[] {
  return Object.entries(sequence)
    .filter(([name, value]) => !elsewhere.has(name) && value !== undefined)
    .map(([name, value]) => {
      const { words, unit } = inWords(name);
      return { what: words, value: valueWords(value, unit) };
    });
}

function valueWords(value: unknown, unit: string): string {
  if (Array.isArray(value)) {
    return value.length === 0 ? 'none' : withUnit(value.map(String).join(', '), unit);
  }
  if (value !== null && typeof value === 'object') {
    return Object.entries(value)
      .map(([name, part]) => {
        const inner = inWords(name);
        return withUnit(`${inner.words} ${String(part)}`, inner.unit);
      })
      .join(', ');
  }
  return typeof value === 'number' ? withUnit(String(value), unit) : String(value);
}

const withUnit = (text: string, unit: string) => (unit === '' ? text : `${text} ${unit}`);
