import { describe, expect, it } from 'vitest';
import {
  achievedFrom,
  foldEvents,
  type ConsoleEvent,
  type ConsoleExam,
  type ConsoleHappening,
} from '../../src/console/index.js';
import { examOf, type ExamRequest } from '../../src/planning/index.js';
import type { AchievedKind, ToleranceStatement } from '../../src/tolerance/index.js';
import { at3, calm, ground, requestFor, shipped } from '../planning/ground.js';

// What is counted is this project's own rule (src/console/achieved.ts); times of sequences are those of their arithmetic:
// head-ax-t2-fse 171.6 s in one piece, head-sag-t2-fse 182 s, head-ax-t2-ss-half 24 slices of 0.558 s in 22.8 s.

const unasked: ToleranceStatement = {
  ...calm,
  still: { kind: 'not asked' },
  hold: { kind: 'not asked' },
  stay: { kind: 'not asked' },
};

function consoleFor(
  examId: string,
  tolerance: ToleranceStatement,
  more: Partial<ExamRequest> = {},
): ConsoleExam {
  const request = requestFor(examId, { tolerance, ...more });
  const found = examOf(request, shipped);
  if (found.kind === 'refused') throw new Error(examId);
  return { request, ...found.value, scanner: at3, ground };
}

type Timed = ConsoleHappening & { atS: number };
const log = (...happenings: Timed[]): ConsoleEvent[] =>
  happenings.map((h, n) => ({ ...h, seq: n + 1 }));
const run = (
  sequenceId: string,
  fromS: number,
  toS: number,
  outcome: ConsoleHappening = { kind: 'clean' },
): Timed[] => [
  { kind: 'started', viewId: 'any', sequenceId, atS: fromS },
  { ...outcome, atS: toS },
];
const moved = { kind: 'moved' } as const;

const brain = consoleFor('brain-general', unasked);
const around = { on: '2026-12-08' };
function seen(console: ConsoleExam, events: readonly ConsoleEvent[], more = {}) {
  const state = foldEvents(events, console.request.tolerance);
  const records = achievedFrom(console, state, { ...around, ...more });
  const of = (kind: AchievedKind) => records.find((r) => r.kind === kind);
  return { records, of };
}

describe('how long somebody kept still', () => {
  it('without movement: all pieces added up, and it ended first', () => {
    const events = log(...run('head-ax-t2-fse', 300, 480), ...run('head-sag-t2-fse', 500, 690));
    expect(seen(brain, events).of('still')).toEqual({
      ...{ kind: 'still', group: 'outpatient', on: '2026-12-08' },
      ...{ seconds: 353.6, censored: true },
    });
  });

  it('up to the first movement, and nothing after it', () => {
    const events = log(
      ...run('head-ax-t2-fse', 300, 480),
      ...run('head-sag-t2-fse', 500, 560, moved),
      ...run('head-sag-t2-fse', 600, 790),
      ...run('head-ax-t2-fse', 800, 810, moved),
    );
    expect(seen(brain, events).of('still')).toMatchObject({ seconds: 231.6, censored: false });
  });

  it('slice by slice only the slices count, not the time between them', () => {
    const events = log(...run('head-ax-t2-ss-half', 300, 325));
    expect(seen(brain, events).of('still')?.seconds).toBeCloseTo(24 * 0.5579, 1);
  });

  it('rotating blades hide part of the movements, so a clean image shows only the rest', () => {
    const blades = shipped.policy.movement.bladesCorrect.value;
    const events = log(...run('head-ax-t2-rotating', 300, 500));
    expect(seen(brain, events).of('still')?.seconds).toBeCloseTo(181.5 * (1 - blades), 1);
  });

  it('never more than the clock shows, and a movement seen late is dated within the sequence', () => {
    expect(seen(brain, log(...run('head-ax-t2-fse', 300, 340))).of('still')?.seconds).toBe(40);
    const late = log(...run('head-ax-t2-fse', 300, 900, moved));
    expect(seen(brain, late).of('still')).toMatchObject({ seconds: 171.6, censored: false });
  });

  it('broken off for another reason: kept still so far', () => {
    const events = log(...run('head-ax-t2-fse', 300, 350, { kind: 'stopped' }));
    expect(seen(brain, events).of('still')).toMatchObject({ seconds: 50, censored: true });
  });

  it('a tap that was taken back shows nothing', () => {
    const events = log(
      ...run('head-ax-t2-fse', 300, 350, moved),
      { kind: 'undone', taken: 2, atS: 352 },
      { kind: 'clean', atS: 480 },
    );
    expect(seen(brain, events).of('still')).toMatchObject({ seconds: 171.6, censored: true });
  });

  it('an exam that began before its slot counts like any other', () => {
    const events = log(...run('head-ax-t2-fse', -400, -300, moved), { kind: 'ended', atS: 0 });
    expect(seen(brain, events).of('still')).toMatchObject({ seconds: 100, censored: false });
  });
});

describe('how long a breath was held', () => {
  const liver = consoleFor('liver', unasked);
  it('the longest hold asked and kept, where none failed', () => {
    // Two holds of 12.6 s at the span planned for an adult who was not asked.
    const events = log(...run('liver-ax-t2-fse-held', 300, 345));
    expect(seen(liver, events).of('hold')).toMatchObject({
      ...{ group: 'adult', censored: true },
      seconds: 12.6,
    });
  });

  it('the breath gave out after 8 s of the first hold', () => {
    const failed = { kind: 'hold failed', afterS: 8 } as const;
    const events = log(...run('liver-ax-t2-fse-held', 300, 309, failed));
    expect(seen(liver, events).of('hold')).toMatchObject({ seconds: 8, censored: false });
  });

  it('in the second hold: time since the start, less the first hold and the rest', () => {
    // 12.6 s, 15 s rest, then 5 s into the second.
    const failed = { kind: 'hold failed', afterS: 32.6 } as const;
    const events = log(...run('liver-ax-t2-fse-held', 300, 333, failed));
    expect(seen(liver, events).of('hold')).toMatchObject({ seconds: 5, censored: false });
  });

  it('without held images there is no record of it', () => {
    expect(seen(brain, log(...run('head-ax-t2-fse', 300, 480))).of('hold')).toBeUndefined();
  });
});

describe('how long somebody bore the scanner', () => {
  it('to the end of the exam, where it was never asked to stop', () => {
    const events = log(...run('head-ax-t2-fse', 300, 480), { kind: 'ended', atS: 1500 });
    expect(seen(brain, events).of('stay')).toMatchObject({
      ...{ group: 'anyone', seconds: 1200, censored: true },
    });
  });

  it('to the first wish to come out, even if the patient was talked round', () => {
    const events = log(
      { kind: 'started', viewId: 'any', sequenceId: 'head-ax-t2-fse', atS: 300 },
      { kind: 'wants out', atS: 420 },
      { kind: 'statement', stay: { kind: 'stated', seconds: 1800 }, atS: 450 },
      { kind: 'clean', atS: 480 },
      { kind: 'wants out', atS: 900 },
      { kind: 'ended', atS: 1000 },
    );
    expect(seen(brain, events).of('stay')).toMatchObject({ seconds: 120, censored: false });
  });
});

describe('what was said', () => {
  it("is the request's own statement, not what taps made of it", () => {
    const events = log(
      { kind: 'statement', still: { kind: 'stated', seconds: 20 }, atS: 250 },
      ...run('head-ax-t2-fse', 300, 400, moved),
    );
    const said = { ...calm, saidBy: 'carer' } as const;
    expect(seen(consoleFor('brain-general', said), events).of('still')).toMatchObject({
      ...{ statedS: 2400, saidBy: 'carer' },
      ...{ seconds: 100, censored: false },
    });
    expect(seen(brain, events).of('still')).not.toHaveProperty('statedS');
  });

  it('the group is the one planning takes its prior from', () => {
    const group = (more: Partial<ToleranceStatement>) =>
      seen(
        consoleFor('brain-general', { ...unasked, ...more }),
        log(...run('head-ax-t2-fse', 300, 480)),
      ).of('still')?.group;
    expect(group({ ageYears: 4 })).toBe('child under 7');
    expect(group({ ageYears: 45, conditions: ['pain'] })).toBe('emergency');
    expect(group({ ageYears: 45, patientClass: 'inpatient' })).toBe('inpatient');
  });
});

describe('time', () => {
  const events = log(...run('head-ax-t2-fse', 365, 540), { kind: 'ended', atS: 1500 });
  it('getting in: from the start of the slot to the first sequence, less localiser, pause and set-up', () => {
    // 40 s localiser and 25 s pause in the policy that ships.
    const { of } = seen(brain, events, { entryFromS: 0, plannedS: 1320 });
    expect(of('entry')).toMatchObject({ group: 'outpatient, walking', seconds: 300 });
    expect(of('exam')).toMatchObject({ group: 'brain-general', seconds: 1500, statedS: 1320 });
  });

  it('from the arrival, where that was later', () => {
    expect(seen(brain, events, { entryFromS: 120 }).of('entry')?.seconds).toBe(180);
  });

  it('an exam begun before its slot, or by a clock of its own, says nothing of getting in', () => {
    expect(seen(brain, events, {}).of('entry')).toBeUndefined();
    const early = log(...run('head-ax-t2-fse', -60, 120), { kind: 'ended', atS: 900 });
    const { of } = seen(brain, early, { entryFromS: 0 });
    expect([of('entry'), of('exam')]).toEqual([undefined, undefined]);
  });
});

describe('nothing about a person', () => {
  it('a record holds group, kind, seconds, what was said and the day, and no more', () => {
    const person = { ...calm, ageYears: 4, conditions: ['pain', 'tremor'] as const };
    const request = { id: 'R-4711', note: 'Jo Quill, born 2022' };
    const events = log(...run('head-ax-t2-fse', 365, 540), { kind: 'ended', atS: 900 });
    const { records } = seen(consoleFor('brain-general', person, request), events, {
      ...{ entryFromS: 0, plannedS: 900 },
    });
    const allowed = ['kind', 'group', 'seconds', 'censored', 'statedS', 'saidBy', 'on'];
    for (const record of records)
      for (const key of Object.keys(record)) expect(allowed).toContain(key);
    expect(JSON.stringify(records)).not.toMatch(/4711|Quill|2022|tremor|pain/);
    expect(new Set(records.map((r) => r.kind)).size).toBe(records.length);
  });

  it('an exam of which nothing was tapped leaves nothing', () => {
    expect(seen(brain, []).records).toEqual([]);
  });
});
