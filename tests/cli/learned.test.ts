import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it, vi } from 'vitest';
import { learnedFrom } from '../../src/cli/commands/learned.js';
import { openStore } from '../../src/store/index.js';
import type { AchievedRecord } from '../../src/tolerance/index.js';
import { at, examRequest } from '../store/ground.js';

// What the command prints is held against what was put into the store; the figures are worked by hand.

/** A store with as many done exams as there are lists of records. */
async function storeWith(exams: readonly (readonly AchievedRecord[])[]): Promise<string> {
  const file = join(mkdtempSync(join(tmpdir(), 'stillspan-learned-')), 'store.sqlite');
  const store = await openStore({ kind: 'sqlite', file });
  for (const [n, achieved] of exams.entries()) {
    const requestId = `R-${n + 1}`;
    await store.requests.add(examRequest(requestId), 'Ina', 1);
    await store.bookings.place({ requestId, ...at(5 * n, 5) }, 'Ina', 2);
    const answers = [{ questionId: 'a', name: 'A', grade: 'diagnostic' }] as const;
    const exam = { bookingId: `${requestId}.1`, version: 1, answers, dueDate: '2026-12-20' };
    await store.owed.recordDone({ ...exam, achieved }, 'Tom', 3);
  }
  await store.close();
  return file;
}

async function printed(work: () => Promise<number>) {
  let text = '';
  const keep = (chunk: unknown) => ((text += String(chunk)), true);
  const out = vi.spyOn(process.stdout, 'write').mockImplementation(keep);
  const err = vi.spyOn(process.stderr, 'write').mockImplementation(keep);
  const code = await work().finally(() => [out, err].forEach((spy) => spy.mockRestore()));
  return { code, text };
}

const still = (seconds: number, censored: boolean): readonly AchievedRecord[] => [
  { kind: 'still', group: 'outpatient', seconds, censored, on: '2026-12-08' },
];
const forty = [
  ...Array.from({ length: 10 }, () => still(600, false)),
  ...Array.from({ length: 30 }, () => still(1800, true)),
];

describe('the command learned', () => {
  it('says what records show beside the policy, and that nothing is switched on', async () => {
    const file = await storeWith(forty);
    const { code, text } = await printed(() => learnedFrom({ file }));
    expect(code).toBe(0);
    const flowing = text.replace(/\s+/g, ' ');
    expect(flowing).toContain('Of 40 outpatients who were not asked, 75 % kept still for 25 min');
    expect(flowing).toContain('40 record(s), 30 ended before it happened; policy: 93 % at 25 min');
    expect(flowing).toContain('once somebody signs for it');
    for (const line of text.split('\n')) expect(line.length).toBeLessThanOrEqual(80);
  });

  it('the same as one row a figure, and as JSON with its curve', async () => {
    const file = await storeWith(forty);
    const { text } = await printed(() => learnedFrom({ file, csv: true }));
    const [header, ...rows] = text.trim().split('\r\n');
    const columns = header!.split(',');
    expect(rows).toHaveLength(22 + 1);
    for (const row of rows)
      expect(row.match(/("(?:[^"]|"")*"|[^,]*)(,|$)/g)!.filter((m) => m !== '')).toHaveLength(
        columns.length,
      );
    expect(rows[0]).toMatch(
      /^"still","outpatient",40,30,"2026-12-08",1500,"s",0\.75,0\.58\d*,0\.85\d*,0\.925,"ready","no"/,
    );
    const json = await printed(() => learnedFrom({ file, json: true }));
    const { figures } = JSON.parse(json.text) as {
      figures: readonly Record<string, unknown>[];
    };
    expect(figures[0]).toMatchObject({
      ...{ kind: 'still', group: 'outpatient', records: 40 },
      curve: [{ time: 600, atRisk: 40, events: 10, survival: 0.75 }],
    });
  });

  it('with no record says that the policy rules; with no file says how to get one', async () => {
    const none = await storeWith([]);
    expect((await printed(() => learnedFrom({ file: none }))).text).toContain('No exam has left');
    const { code, text } = await printed(() => learnedFrom({ file: '/nowhere/store.sqlite' }));
    expect(code).toBe(4);
    expect(text).toContain('start the pages once');
  });
});
