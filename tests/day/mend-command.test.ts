import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { afterAll, afterEach, describe, expect, it, vi } from 'vitest';
import { mendFile } from '../../src/cli/commands/mend.js';
import { demoFolder } from '../../src/cli/files.js';
import type { MendFlags } from '../../src/cli/mend-asked.js';
import type { Booking, Repair } from '../../src/day/index.js';

/** Some rows of the demo: the second scanner's day, a little of the first, two who wait. */
const demo = join(mkdtempSync(join(tmpdir(), 'stillspan-mend-')), 'requests.csv');
const wanted = /^(request_id|R-(103|111|112|113|117|157|165),)|,mr2,2026-12-08/;
const rows = readFileSync(join(demoFolder, 'requests.csv'), 'utf8').split('\n');
writeFileSync(demo, rows.filter((row) => wanted.test(row)).join('\n'));
afterAll(() => rmSync(dirname(demo), { recursive: true }));
const day = '2026-12-08';

interface Printed {
  readonly code: number;
  readonly text: string;
  readonly problems: string;
}

function printed(flags: MendFlags): Printed {
  let text = '';
  let problems = '';
  const keep = (take: (chunk: string) => void) => (chunk: unknown) => {
    take(String(chunk));
    return true;
  };
  vi.spyOn(process.stdout, 'write').mockImplementation(keep((c) => (text += c)));
  vi.spyOn(process.stderr, 'write').mockImplementation(keep((c) => (problems += c)));
  const code = mendFile(demo, { minutes: '20', ...flags });
  vi.restoreAllMocks();
  return { code, text: text.replace(/\u001b\[\d+m/g, ''), problems: problems.replace(/\s+/g, ' ') };
}
const asJson = (flags: MendFlags) =>
  JSON.parse(printed({ ...flags, json: true }).text) as {
    readonly proposals: readonly Repair[];
    readonly freed?: { readonly place: Booking; readonly couldCome: readonly string[] };
  };
afterEach(() => vi.restoreAllMocks());

const down: MendFlags = { down: 'mr2', day, from: '10:00', to: '14:00', now: '09:30' };

describe('the mend command', () => {
  // Source: common practice, no source (80-column terminals); that nothing is booked is a rule of the house.
  it('says in 80 columns who moves, who must be spoken with and how sure it is, and books nothing', () => {
    const before = readFileSync(demo, 'utf8');
    const { code, text } = printed(down);
    expect(code).toBe(0);
    expect(readFileSync(demo, 'utf8')).toBe(before);
    for (const line of text.split('\n')) expect(line.length).toBeLessThanOrEqual(80);
    const flat = text.replace(/\s+/g, ' ');
    expect(flat).toContain('Who starts before 10:30 is on the way in and is not moved');
    expect(flat).toMatch(/Proved|Not proved/);
    expect(flat).toContain('Who must be spoken with R-120');
    expect(flat).toContain('nothing is booked');
  });

  // Source: holds for any right planner.
  it('moves nobody who starts before an hour from now, and nobody into the stretch that is lost', () => {
    const { proposals } = asJson(down);
    const { moves } = proposals[0]!;
    expect(moves.length).toBeGreaterThan(2);
    for (const { from, to } of moves) {
      expect(from!.startMin).toBeGreaterThanOrEqual(630);
      expect(to.date > day || to.startMin >= 630).toBe(true);
      if (to.scannerId === 'mr2' && to.date === day)
        expect(to.startMin >= 840 || to.startMin + to.slotMin <= 600).toBe(true);
    }
    const gone = asJson({ ...down, down: undefined, staffGone: 'mr2' } as unknown as MendFlags);
    expect(gone.proposals[0]!.moves.map((m) => m.to)).toEqual(moves.map((m) => m.to));
    expect(asJson({ ...down, before: '13:00' }).proposals[0]!.moves.length).toBeLessThan(
      moves.length,
    );
  });

  // Source: holds for any right planner.
  it('a late patient begins no sooner than they can be there, an emergency no sooner than now', () => {
    const late = asJson({ late: 'R-103', minutes: '30', now: '09:50' }).proposals[0]!;
    const own = late.moves.find((m) => m.requestId === 'R-103')!;
    expect(own.to.startMin).toBeGreaterThanOrEqual(630);
    const { moves } = asJson({ emergency: 'R-165', day, now: '10:05' }).proposals[0]!;
    const placed = moves.find((m) => m.requestId === 'R-165')!;
    expect(placed.to).toMatchObject({ date: day });
    expect(placed.to.startMin).toBeGreaterThanOrEqual(605);
  });

  // Source: holds for any right planner.
  it('an exam that runs over keeps its scanner: nobody else is there before its new end', () => {
    const { moves, waitOnSite } = asJson({ overrun: 'R-103', minutes: '40' }).proposals[0]!;
    expect(waitOnSite.map((w) => w.requestId)).toEqual(['R-111']);
    for (const { to } of [...moves, ...waitOnSite])
      if (to.scannerId === 'mr1' && to.date === day)
        expect(to.startMin).toBeGreaterThanOrEqual(10 * 60 + 45 + 40);
  });

  // Source: holds for any right planner.
  it('names who of those waiting could come for a place that fell free, and moves nobody', () => {
    const flags: MendFlags = { noShow: 'R-117', now: '16:15', before: '16:20' };
    const { freed, proposals } = asJson(flags);
    expect(freed?.place).toMatchObject({ requestId: 'R-117', scannerId: 'mr1', startMin: 975 });
    expect(freed?.couldCome).toContain('R-157');
    expect(proposals[0]!.moves).toEqual([]);
    expect(printed(flags).text).toContain('R-157');
    expect(asJson({ ...flags, before: '17:59' }).freed?.couldCome).toEqual([]);
  });

  // Source: common practice, no source (usage errors have their own exit code).
  it.each([
    [{}, 'nothing given'],
    [{ ...down, late: 'R-103' }, '--down and --late'],
    [{ ...down, down: 'mr9' }, 'mr1, mr2, mr3'],
    [{ ...down, to: '09:00' }, 'its end after its start'],
    [{ ...down, now: '9.30' }, '24-hour time'],
    [{ ...down, day: '2027-01-01' }, 'the planned days'],
    [{ late: 'R-103', minutes: 'many' }, 'a whole number'],
    [{ late: 'R-157' }, 'has no place'],
    [{ emergency: 'R-103' }, 'has a place'],
  ] as const)('refuses %j and says what is wrong: %s', (flags, words) => {
    const { code, problems, text } = printed(flags as MendFlags);
    expect({ code, text }).toEqual({ code: 2, text: '' });
    expect(problems).toContain(words);
  });

  it('names a request that is not in the file', () => {
    expect(() => printed({ late: 'R-999' })).toThrow('R-999');
  });
});
