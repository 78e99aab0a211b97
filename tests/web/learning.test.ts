import { cpSync, mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { demoFolder, shippedLibraryFolder } from '../../src/cli/files.js';
import { openDepartment, openGround, openRequests } from '../../src/cli/ground.js';
import { withRecords } from '../../src/cli/own-records.js';
import { planExam } from '../../src/planning/index.js';
import type { AchievedRecord } from '../../src/tolerance/index.js';
import { learningPage } from '../../src/web/view-models/learning-page.js';
import { siteDate, siteMinute } from '../../src/web/site-time.js';
import { openSite, type Site } from '../browser/harness.js';
import { at3, calm, requestFor, shipped } from '../planning/ground.js';

// Rules are the project's own: what was seen is recorded once with the done exam, and changes nothing without a signature.

const department = openDepartment();
const record = (seconds: number, censored: boolean, more: Partial<AchievedRecord> = {}) =>
  ({
    ...{ kind: 'still', group: 'outpatient', on: '2026-12-08', seconds, censored },
    ...more,
  }) as AchievedRecord;
const forty = [
  ...Array.from({ length: 8 }, () => record(600, false)),
  ...Array.from({ length: 32 }, () => record(1800, true)),
];
const pageOf = (records: readonly AchievedRecord[]) =>
  learningPage({
    ...{ records, written: shipped.policy, library: shipped },
    ...{ scanners: department.scanners, today: '2026-12-08' },
  });

describe('an exam worked at the scanner and recorded as done', () => {
  let site: Site;
  beforeEach(async () => {
    site = await openSite({ seed: false });
    const { requests } = openRequests(join(demoFolder, 'requests.csv'));
    const of = (id: string) => requests.find((r) => r.request.id === id)!;
    const nowMs = Date.now();
    const today = { date: siteDate(nowMs, department.zone), teams: [] };
    const startMin = 5 * Math.floor(siteMinute(nowMs, department.zone) / 5);
    await site.store.seed(
      {
        requests: [of('R-101').request, of('R-104').request],
        bookings: [
          { requestId: 'R-101', scannerId: 'mr1', ...today, startMin, slotMin: 30 },
          { ...of('R-104').booking!, teams: [] },
        ],
      },
      'first start',
      0,
    );
  });
  afterEach(() => site.close());

  const look = async (path: string) => (await fetch(site.url + path)).text();
  const tap = async (id: string, taps: readonly [number, Record<string, unknown>][]) => {
    const answer = await fetch(`${site.url}/console/${id}/taps`, {
      method: 'POST',
      headers: { 'Content-Type': 'application/json' },
      body: JSON.stringify({
        taps: taps.map(([atS, happening], n) => ({ tapId: `${id}-tap-${n}`, atS, happening })),
      }),
    });
    expect(answer.status).toBe(200);
  };
  const finish = async (id: string) => {
    const stored = (await site.store.bookings.get(id))!;
    const { body } = (await site.store.requests.get(stored.requestId))!;
    const questions = shipped.exams.get(body.examId)!.questions;
    const fields = [
      ['version', String(stored.version)],
      ...questions.map((q) => [`grade_${q.id}`, 'diagnostic']),
    ];
    return fetch(`${site.url}/bookings/${id}/done`, {
      ...{ method: 'POST', redirect: 'manual', body: new URLSearchParams(fields) },
    });
  };
  const started = (sequenceId: string) => ({ kind: 'started', viewId: 'axial-t2', sequenceId });

  it('shows up as records, once, beside what was said; before that the page says what will be kept', async () => {
    const empty = await look('/learning');
    expect(empty).toContain('No exam has left a record yet');
    expect(empty).toContain('never race or ethnicity');
    await tap('R-101.1', [
      [365, started('head-ax-t2-fse')],
      [525, { kind: 'clean' }],
      [560, started('head-ax-flair-fse')],
      [640, { kind: 'moved' }],
      [700, { kind: 'wants out' }],
      [760, { kind: 'ended' }],
    ]);
    expect(await site.store.achieved.list()).toEqual([]);
    expect((await finish('R-101.1')).status).toBe(303);
    // Sent twice: the second is told that it changed nothing, and the records below are those of one exam.
    const again = await finish('R-101.1');
    expect(again.headers.get('location')).toBe('/owed');
    expect(decodeURIComponent(again.headers.get('set-cookie') ?? '')).toContain(
      'this changed nothing',
    );

    const records = await site.store.achieved.list();
    const of = (kind: string) => records.find((r) => r.kind === kind);
    expect(records).toHaveLength(4);
    expect(of('still')).toMatchObject({
      ...{ group: 'outpatient', censored: false },
      ...{ statedS: 1500, saidBy: 'patient' },
    });
    // 160 s of the first by the clock (162.8 s planned at 1.5 T), then 80 s until the movement.
    expect(of('still')?.seconds).toBeCloseTo(240, 1);
    expect(of('stay')).toMatchObject({ seconds: 335, censored: false, statedS: 2700 });
    expect(of('entry')).toMatchObject({ seconds: 300, group: 'outpatient, walking' });
    expect(of('exam')).toMatchObject({ seconds: 760, group: 'brain-general' });

    const page = await look('/learning');
    expect(page).toContain('Keeping still: statements by the patient');
    expect(page).toContain('Too few to change a plan: 1 of the 30 records');
    expect(page).not.toContain('R-101');
  });

  it('by a clock of its own, days from its slot: patient yes, time of getting in no', async () => {
    const { id } = (await site.store.bookings.ofRequest('R-104'))!;
    await tap(id, [
      [0, started('head-ax-t2-fse')],
      [180, { kind: 'clean' }],
      [900, { kind: 'ended' }],
    ]);
    await finish(id);
    const kinds = (await site.store.achieved.list()).map((r) => r.kind).sort();
    expect(kinds).toEqual(['stay', 'still']);
  });

  it('recorded as done from the day board without a tap leaves nothing', async () => {
    expect((await finish('R-101.1')).status).toBe(303);
    expect(await site.store.achieved.list()).toEqual([]);
    expect(await look('/learning')).toContain('No exam has left a record yet');
  });
});

describe('the page with enough records', () => {
  const [section] = pageOf(forty).spans;

  it('says prior, data and estimate, and what plans would say', () => {
    expect(section).toMatchObject({
      ...{ title: 'Keeping still: outpatients who were not asked', records: 40, censored: 32 },
      says: "Of 40 outpatients who were not asked, 80 % kept still for 25 min (64 to 89 %); the policy's own figure is 93 %.",
    });
    expect(section?.standing).toContain('once somebody signs');
    expect(section?.effects).toHaveLength(3);
    for (const effect of section?.effects ?? [])
      expect(parseFloat(effect.after)).toBeLessThanOrEqual(
        parseFloat(effect.before.replace('over ', '')),
      );
    expect(section?.chart).toContain('role="img"');
  });

  it('too few, or not followed far enough, offers no entry or one that says where it reads', () => {
    expect(pageOf(forty.slice(0, 12)).spans[0]).toMatchObject({ yaml: '', effects: [] });
    const short = forty.map((r) => ({ ...r, seconds: Math.min(r.seconds, 800) }));
    const [one] = pageOf(short).spans;
    expect(one?.standing).toContain('the curve can be read up to 13 min');
    expect(one?.yaml).toContain('readAtS: 780');
    expect(one?.carriedOn).toContain('as they began');
  });

  it('the entry it shows does not load unsigned; signed it changes plans, which say whose figures they use', async () => {
    const folder = join(mkdtempSync(join(tmpdir(), 'stillspan-signed-')), 'library');
    cpSync(shippedLibraryFolder, folder, { recursive: true });
    const file = join(folder, 'policy.yaml');
    const written = readFileSync(file, 'utf8');
    const paste = (yaml: string) =>
      writeFileSync(file, written.replace(/^ {2}entries: \[\]$/m, `  entries:\n${yaml}`));
    paste(section!.yaml);
    expect(() => openGround(folder)).toThrow(/learning.*signedBy|signedBy/);
    paste(section!.yaml.replace('signedBy: ""', 'signedBy: Lead technologist'));
    const { ground, problems } = openGround(folder);
    expect(problems).toEqual([]);

    const unasked = { kind: 'not asked' } as const;
    const tolerance = { ...calm, still: unasked };
    const request = requestFor('brain-general', { tolerance });
    const planned = async (records: readonly AchievedRecord[]) => {
      const outcome = await planExam(request, at3, withRecords(ground, records));
      if (outcome.kind !== 'planned') throw new Error('not planned');
      return outcome.plan;
    };
    const [without, withThem] = [await planned([]), await planned(forty)];
    expect(without.patient.still).toContain('JACR 2015');
    expect(withThem.patient.still).toContain(
      "80 % keep still for 25 min (this site's own records: 40 exams",
    );
    expect(withThem.patient.still).toContain('signed by Lead technologist');
    const chances = (plan: typeof without) =>
      plan.steps.flatMap((s) => (s.cleanChance === undefined ? [] : [s.cleanChance]));
    expect(Math.min(...chances(withThem))).toBeLessThan(Math.min(...chances(without)));

    const { spans } = learningPage({
      ...{ records: [...forty, record(60, false, { on: '2026-12-20' })] },
      ...{ written: ground.library.policy, library: ground.library },
      ...{ scanners: department.scanners, today: '2026-12-21' },
    });
    expect(spans[0]?.standing).toMatch(
      /^In use .* signed by Lead technologist on 2026-12-08 on 40 records.*1 record has come since/,
    );
  });

  it('a signature for a group the policy does not have is named, and the rest loads', () => {
    const folder = join(mkdtempSync(join(tmpdir(), 'stillspan-signed-')), 'library');
    cpSync(shippedLibraryFolder, folder, { recursive: true });
    const file = join(folder, 'policy.yaml');
    const yaml = section!.yaml
      .replace('signedBy: ""', 'signedBy: Lead technologist')
      .replace('"outpatient"', '"outpatients"');
    writeFileSync(
      file,
      readFileSync(file, 'utf8').replace(/^ {2}entries: \[\]$/m, `  entries:\n${yaml}`),
    );
    const { problems } = openGround(folder);
    expect(problems).toHaveLength(1);
    expect(problems[0]?.limit).toContain('child under 7');
  });
});
