import { parse } from 'csv-parse/sync';
import type { Problem } from '../../shared/index.js';
import { describe } from '../library/index.js';
import { neededColumns, requestColumns, type RawRow, type RequestColumn } from './columns.js';
import { readRow, type BookedRequest } from './read-row.js';

export interface ReadRequests {
  readonly requests: readonly BookedRequest[];
  /** Everything that could not be used, row by row; rows not named here were read. */
  readonly problems: readonly Problem[];
}

interface PlacedRow {
  readonly place: string;
  readonly row: RawRow;
}

/** Requests from a spreadsheet's CSV (UTF-8, comma or semicolon, header row). */
export function readRequestsCsv(text: string): ReadRequests {
  const problems: Problem[] = [];
  const header = (text.replace(/^\uFEFF/, '').split(/\r?\n/, 1)[0] ?? '').trim();
  if (header === '') return { requests: [], problems: [emptyList('the list')] };
  const delimiter = header.split(';').length > header.split(',').length ? ';' : ',';
  let columns: string[] = [];
  let records: {
    readonly record: Record<string, string>;
    readonly info: { readonly lines: number };
  }[];
  try {
    records = parse(text, {
      bom: true,
      delimiter,
      columns: (names: string[]) => (columns = names.map((n) => n.trim().toLowerCase())),
      skip_empty_lines: true,
      relax_column_count: true,
      skip_records_with_error: true,
      info: true,
      on_skip: (error, raw) => {
        problems.push({
          code: 'request-row',
          thing: `row ending on line ${error?.lines ?? '?'}`,
          value: describe(typeof raw === 'string' ? raw : error?.message),
          limit: 'a row must be readable as comma-separated text',
          wayOut: 'Check the quotation marks of this row.',
        });
      },
    }) as unknown as typeof records;
  } catch (error) {
    problems.push({
      code: 'request-file',
      thing: 'the list',
      value: (error as Error).message,
      limit: 'the file must be comma-separated text with a header row',
      wayOut: 'Save it from the spreadsheet as CSV (UTF-8).',
    });
    return { requests: [], problems };
  }
  problems.push(...columnProblems(columns));
  const placed = records.map(({ record, info }) => ({
    place: `row ${info.lines}`,
    row: record as RawRow,
  }));
  return collect(placed, problems);
}

/** Requests from JSON: one object or an array of them, the CSV's column names as keys. */
export function readRequestsJson(text: string): ReadRequests {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch (error) {
    const problem: Problem = {
      code: 'request-file',
      thing: 'the file',
      value: (error as Error).message,
      limit: 'it must be JSON',
      wayOut: 'Correct the file at that place.',
    };
    return { requests: [], problems: [problem] };
  }
  const items = Array.isArray(value) ? value : [value];
  const problems: Problem[] = items.length === 0 ? [emptyList('the file')] : [];
  const placed: PlacedRow[] = [];
  items.forEach((item: unknown, index) => {
    const place = `entry ${index + 1}`;
    if (item === null || typeof item !== 'object' || Array.isArray(item)) {
      problems.push({
        code: 'request-row',
        thing: place,
        value: describe(item),
        limit: 'each entry is an object',
        wayOut: 'Write { "request_id": ..., "exam": ..., "slot": ... }.',
      });
      return;
    }
    for (const key of Object.keys(item)) {
      if (!requestColumns.includes(key as RequestColumn)) {
        problems.push({ ...unknownColumn(key), thing: `${place}, field ${key}` });
      }
    }
    placed.push({ place, row: flattened(item as Record<string, unknown>) });
  });
  return collect(placed, problems);
}

function collect(placed: readonly PlacedRow[], problems: Problem[]): ReadRequests {
  const requests: BookedRequest[] = [];
  const seen = new Map<string, string>();
  for (const { place, row } of placed) {
    const read = readRow(row, place);
    if (read.kind === 'refused') {
      problems.push(...read.problems);
      continue;
    }
    const { id } = read.value.request;
    const earlier = seen.get(id);
    if (earlier !== undefined) {
      problems.push({
        code: 'request-duplicate',
        thing: `${place}, field request_id`,
        value: `"${id}"`,
        limit: `already used in ${earlier}`,
        wayOut: 'Give it a number of its own; the first one was kept.',
      });
      continue;
    }
    seen.set(id, place);
    requests.push(read.value);
  }
  return { requests, problems };
}

function columnProblems(columns: readonly string[]): Problem[] {
  const missing = neededColumns
    .filter((needed) => !columns.includes(needed))
    .map((needed) => ({
      code: 'request-column',
      thing: `header, column ${needed}`,
      value: 'missing',
      limit: `needed columns: ${neededColumns.join(', ')}`,
      wayOut: 'Add the column.',
    }));
  const unknown = columns
    .filter((name) => name !== '' && !requestColumns.includes(name as RequestColumn))
    .map(unknownColumn);
  return [...missing, ...unknown];
}

const unknownColumn = (name: string): Problem => ({
  code: 'request-column',
  thing: `header, column ${name}`,
  value: 'not a column of this list, so it was not read',
  limit: `columns: ${requestColumns.join(', ')}`,
  wayOut: 'Rename or remove it.',
});

const emptyList = (thing: string): Problem => ({
  code: 'request-file',
  thing,
  value: 'empty',
  limit: 'a header row and at least one request',
  wayOut: 'Fill in a row, for example from data-demo/requests.csv.',
});

/** JSON values as the text a spreadsheet would hold. */
function flattened(item: Record<string, unknown>): RawRow {
  const row: Record<string, string> = {};
  for (const [key, value] of Object.entries(item)) {
    if (value === null || value === undefined) continue;
    if (Array.isArray(value)) row[key] = value.map(String).join(';');
    else if (typeof value === 'boolean') row[key] = value ? 'yes' : 'no';
    else row[key] = typeof value === 'object' ? JSON.stringify(value) : String(value);
  }
  return row;
}
