import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  parseDurationS,
  readRequestsCsv,
  readRequestsJson,
  requestColumns,
} from '../../src/interchange/index.js';

const header = requestColumns.join(',');
/** A row with the named columns filled in. */
function row(values: Partial<Record<(typeof requestColumns)[number], string>>): string {
  const full = { request_id: 'R-1', exam: 'brain-general', slot: '30 min', ...values };
  return requestColumns.map((c) => full[c as keyof typeof full] ?? '').join(',');
}

describe('a duration', () => {
  // Arithmetic of units; the accepted spellings are ours.
  it.each([
    ['20 min', 1200],
    ['1200 s', 1200],
    ['0.5 h', 1800],
    ['1,5 min', 90],
    ['12s', 12],
    ['2 Minutes', 120],
  ])('%s is %d seconds', (text, seconds) => {
    expect(parseDurationS(text)).toBeCloseTo(seconds, 9);
  });

  it.each(['20', '', 'min', '-5 min', 'NaN s', '1e99999 h', '5 days', '٣ min'])(
    'is refused rather than guessed: %j',
    (text) => {
      expect(parseDurationS(text)).toBeUndefined();
    },
  );
});

describe('a request list from a spreadsheet', () => {
  it('reads a row with quotes, semicolons inside a cell, and a byte-order mark', () => {
    const text = `\uFEFF${header}\n${row({ questions: 'mass-effect;small-lesion', note: '"walks slowly, hears badly"' })}\n`;
    const { requests, problems } = readRequestsCsv(text);
    expect(problems).toEqual([]);
    expect(requests[0]?.request.questionIds).toEqual(['mass-effect', 'small-lesion']);
    expect(requests[0]?.request.note).toBe('walks slowly, hears badly');
  });

  it('reads lists that a spreadsheet saved with semicolons between cells', () => {
    const { requests, problems } = readRequestsCsv('request_id;exam;slot\nR-1;knee;20 min\n');
    expect(problems).toEqual([]);
    expect(requests).toHaveLength(1);
  });

  it('names row, field, value and the way out for everything wrong in a row', () => {
    const { requests, problems } = readRequestsCsv(
      `${header}\n${row({ slot: '30', priority: 'soon', age_years: '-4' })}\n`,
    );
    expect(requests).toEqual([]);
    expect(problems.map((p) => p.thing)).toEqual([
      'row 2, field slot',
      'row 2, field age_years',
      'row 2, field priority',
    ]);
    for (const problem of problems) {
      expect(problem.value).not.toBe('');
      expect(problem.limit).not.toBe('');
      expect(problem.wayOut).not.toBe('');
    }
  });

  it('keeps the good rows when others are bad', () => {
    const text = [
      header,
      row({ request_id: 'R-1' }),
      row({ request_id: 'R-2', slot: '-5 min' }),
      row({ request_id: 'R-3' }),
      row({ request_id: 'R-1' }),
      'broken "row, with a stray quote',
      row({ request_id: 'R-4' }),
    ].join('\n');
    const { requests, problems } = readRequestsCsv(text);
    expect(requests.map((r) => r.request.id)).toEqual(['R-1', 'R-3', 'R-4']);
    expect(problems.some((p) => p.code === 'request-duplicate' && p.limit.includes('row 2'))).toBe(
      true,
    );
  });

  it('says which needed column is missing', () => {
    const { problems } = readRequestsCsv('request_id,exam\nR-1,knee\n');
    expect(problems[0]).toMatchObject({ thing: 'header, column slot', value: 'missing' });
  });

  it('refuses an empty list in words', () => {
    expect(readRequestsCsv('').problems[0]?.value).toBe('empty');
    expect(readRequestsJson('[]').problems[0]?.value).toBe('empty');
  });

  it('will not take a statement that nobody made', () => {
    const { problems } = readRequestsCsv(`${header}\n${row({ still_for: '20 min' })}\n`);
    expect(problems[0]?.thing).toContain('said_by');
  });

  it('a place needs its scanner and a time that exists', () => {
    const bad = (start: string, scanner: string) =>
      readRequestsCsv(`${header}\n${row({ start, scanner })}\n`).problems.map((p) => p.thing);
    expect(bad('2026-12-08 24:10', 'A')).toEqual(['row 2, field start']);
    expect(bad('2026-02-30 09:00', 'A')).toEqual(['row 2, field start']);
    expect(bad('2026-12-08 09:00', '')).toEqual(['row 2, field scanner']);
  });
});

describe('requests as JSON', () => {
  it('CSV and JSON of the same request are the same', () => {
    const csv = readRequestsCsv(
      `${header}\n${row({ questions: 'mass-effect;blood-products', conditions: 'tremor;pain', still_for: '90 s', said_by: 'carer', escort: 'yes' })}\n`,
    );
    const json = readRequestsJson(
      JSON.stringify([
        {
          request_id: 'R-1',
          exam: 'brain-general',
          slot: '1800 s',
          questions: ['mass-effect', 'blood-products'],
          conditions: ['tremor', 'pain'],
          still_for: '1.5 min',
          said_by: 'carer',
          escort: true,
        },
      ]),
    );
    expect(json.problems).toEqual([]);
    expect(json.requests).toEqual(csv.requests);
  });

  it('says where broken JSON breaks', () => {
    expect(readRequestsJson('[{').problems[0]?.limit).toBe('it must be JSON');
  });
});

describe('10,000 malformed requests', () => {
  it('never crash the reader; every refused row is named, every good row is kept', () => {
    // Generated, fixed seed: any text in any column, as CSV text and as JSON values.
    const anything = fc.oneof(
      fc.string(),
      fc.constantFrom(
        '',
        '30 min',
        '-1 s',
        '1e400 h',
        'NaN',
        '=1+1',
        '\u0000',
        '"',
        ';',
        '2026-13-40 99:99',
        'brain-general',
        'yes',
        'not asked',
      ),
      fc.double().map(String),
    );
    const record = fc.record(
      Object.fromEntries(requestColumns.map((c) => [c, anything])) as Record<
        string,
        fc.Arbitrary<string>
      >,
      { requiredKeys: [] },
    );
    const strange = fc.oneof(record, fc.jsonValue());
    fc.assert(
      fc.property(fc.array(strange, { minLength: 10, maxLength: 10 }), (batch) => {
        const good = { request_id: 'GOOD-1', exam: 'knee', slot: '20 min' };
        const { requests, problems } = readRequestsJson(JSON.stringify([...batch, good]));
        expect(requests.some((r) => r.request.id === 'GOOD-1')).toBe(true);
        for (const problem of problems) {
          expect(problem.thing).toMatch(/entry \d+/);
          for (const part of [problem.value, problem.limit, problem.wayOut]) {
            expect(part.length).toBeGreaterThan(0);
          }
        }
        for (const { request } of requests) {
          expect(request.slotS).toBeGreaterThan(0);
          expect(Number.isFinite(request.slotS)).toBe(true);
        }
      }),
      { numRuns: 1000, seed: 20261201 },
    );
  });

  it('arbitrary text as a CSV file is refused or read, never thrown at', () => {
    fc.assert(
      fc.property(fc.string({ maxLength: 300 }), (text) => {
        const read = readRequestsCsv(text);
        expect(read.requests.length + read.problems.length).toBeGreaterThanOrEqual(0);
        const withHeader = readRequestsCsv(`${header}\n${text}\n${row({ request_id: 'LAST' })}`);
        // The last row is read, or something says why not: nothing is lost in silence.
        const kept = withHeader.requests.some((r) => r.request.id === 'LAST');
        expect(kept || withHeader.problems.length > 0).toBe(true);
      }),
      { numRuns: 500, seed: 7 },
    );
  });
});
