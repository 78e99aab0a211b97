import { beforeAll, describe, expect, it } from 'vitest';
import type { SlotAdvice } from '../../src/throughput/index.js';
import { compiledCli, type Ran } from './compiled-cli.js';
import { few, file, joined, unspoken } from './month-files.js';

let stillspan: (args: readonly string[]) => Promise<Ran>;
beforeAll(async () => {
  stillspan = await compiledCli();
});

describe('slots advice', () => {
  const advice = (...args: string[]) => stillspan(['slots', 'advice', few, ...args]);

  it('a row an exam and group in 80 columns, and the same as CSV and JSON', async () => {
    const [text, csv, json] = await Promise.all([advice(), advice('--csv'), advice('--json')]);
    expect([text.code, csv.code, json.code]).toEqual([0, 0, 0]);
    expect(Math.max(...text.out.split('\n').map((l) => l.length))).toBeLessThanOrEqual(80);
    const rows = JSON.parse(json.out) as {
      exam: string;
      kinds: number;
      tenthMin: number;
      medianMin: number;
      ninetiethMin: number;
      advice: SlotAdvice;
    }[];
    expect(rows.reduce((sum, r) => sum + r.kinds, 0)).toBe(12);
    const lines = csv.out.trimEnd().split('\r\n').slice(1);
    expect(lines).toHaveLength(rows.length);
    rows.forEach((row, n) => {
      expect(row.tenthMin).toBeLessThanOrEqual(row.medianMin);
      expect(row.medianMin).toBeLessThanOrEqual(row.ninetiethMin);
      // Ninety percent end within the slot for a chance of ninety percent, and no shorter step of five would do.
      expect(row.advice.forChanceMin).toBe(5 * Math.ceil(row.ninetiethMin / 5 - 1e-9));
      expect(lines[n]).toContain(`"${row.exam}",`);
      expect(lines[n]!.split(',').slice(-2).map(Number)).toEqual([
        row.advice.forChanceMin,
        row.advice.cheapestMin,
      ]);
      expect(text.out).toContain(row.exam.slice(0, 20));
    });
  });

  it('a higher chance never shortens a slot; dearer lateness never a cheapest one', async () => {
    const slots = async (...args: string[]) =>
      (await advice('--csv', ...args)).out
        .trimEnd()
        .split('\r\n')
        .slice(1)
        .map((l) => l.split(',').slice(-2).map(Number));
    const [usual, surer, dearer] = await Promise.all([
      slots(),
      slots('--chance', '98'),
      slots('--late', '20'),
    ]);
    usual.forEach(([forChance, cheapest], n) => {
      expect(surer[n]![0]).toBeGreaterThanOrEqual(forChance!);
      expect(dearer[n]![1]).toBeGreaterThanOrEqual(cheapest!);
    });
  });

  it('what is no chance and no cost is refused with exit code 2', async () => {
    for (const args of [
      ['--chance', '120'],
      ['--chance', 'high'],
      ['--late', '-3'],
      ['--idle', '0'],
    ]) {
      const { code, err } = await advice(...args);
      expect(code).toBe(2);
      expect(err).toContain('is not a number from');
    }
  });

  it('rows that cannot be read are named, the others advised on, exit code 3; none at all is 4', async () => {
    const mixed = file('mixed.csv', 'request_id,exam,slot\nA-1,knee,30 min\nA-2,elbow,30 min\n');
    const some = await stillspan(['slots', 'advice', mixed]);
    expect(some.code).toBe(3);
    expect(some.out).toContain('Knee');
    expect(joined(some.err)).toContain('request A-2, field exam: "elbow"');
    const none = file('elbows.csv', 'request_id,exam,slot\nA-2,elbow,30 min\n');
    expect((await stillspan(['slots', 'advice', none])).code).toBe(4);
    expect((await stillspan(['slots', 'compare', none])).code).toBe(4);
  });
});

describe('slots compare', () => {
  const compare = (...args: string[]) =>
    stillspan(['slots', 'compare', few, '--days', '1', '--lives', '10', ...args]);

  it('three rules side by side; the same again gives the same; CSV and JSON hold the same means', async () => {
    const [text, again, csv, json] = await Promise.all([
      compare(),
      compare(),
      compare('--csv'),
      compare('--json'),
    ]);
    expect(text.code).toBe(0);
    expect(again.out).toBe(text.out);
    expect(text.out).toMatch(/12 requests, one day +by tolerance +fixed 30 min +fixed 45 min/);
    expect(Math.max(...text.out.split('\n').map((l) => l.length))).toBeLessThanOrEqual(80);
    expect(unspoken(text.out, [])).toEqual([]);
    const outcomes = JSON.parse(json.out) as { placed: number; diagnostic: { mean: number } }[];
    expect(outcomes.map((o) => o.placed)).toEqual(
      /Patients placed +(\d+) +(\d+) +(\d+)/.exec(text.out)!.slice(1).map(Number),
    );
    const rows = csv.out.trimEnd().split('\r\n');
    expect(rows).toHaveLength(1 + 3 * 5);
    const answered = rows.filter((r) => r.includes('answered diagnostically'));
    answered.forEach((row, n) =>
      expect(Number(row.split(',').at(-3))).toBeCloseTo(outcomes[n]!.diagnostic.mean, 6),
    );
  });
});
