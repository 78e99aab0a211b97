import { describe, expect, it } from 'vitest';
import type { LearningEntry, SitePolicy } from '../../src/exams/index.js';
import {
  learn,
  profileOf,
  switchedOn,
  withLearned,
  type AchievedRecord,
  type LearnedSpan,
  type ToleranceStatement,
} from '../../src/tolerance/index.js';
import { calm, shipped } from '../planning/ground.js';

// Rules are the project's own: a prior gives way only to a signature, to enough records and to a curve that reaches its point.

const { policy } = shipped;
const unasked: ToleranceStatement = {
  ...calm,
  still: { kind: 'not asked' },
  hold: { kind: 'not asked' },
  stay: { kind: 'not asked' },
};

const still = (seconds: number, censored: boolean, more: Partial<AchievedRecord> = {}) =>
  ({
    ...{ kind: 'still', group: 'outpatient', on: '2026-12-01' },
    ...{ seconds, censored },
    ...more,
  }) as AchievedRecord;
const many = (n: number, record: AchievedRecord): AchievedRecord[] =>
  Array.from({ length: n }, () => record);

/** 40 outpatients: 4 moved after 10 min, the others kept still for half an hour. */
const forty = [...many(4, still(600, false)), ...many(36, still(1800, true))];

const sign = (more: Partial<LearningEntry> = {}): LearningEntry => ({
  ...{ group: 'outpatient', kind: 'still', signedBy: 'Lead technologist' },
  ...{ signedOn: '2026-12-02', because: 'Forty exams' },
  ...more,
});
const signed = (...entries: LearningEntry[]): SitePolicy => ({
  ...policy,
  learning: { ...policy.learning, entries },
});
const spanOf = (
  records: readonly AchievedRecord[],
  kind: string,
  group: string,
  under: SitePolicy = policy,
): LearnedSpan =>
  learn(records, under).spans.find((s) => s.prior.kind === kind && s.prior.group === group)!;

describe('an estimate from records', () => {
  it('is the share that kept still at the point of the prior, with limits, and says so', () => {
    const estimate = spanOf(forty, 'still', 'outpatient');
    expect(estimate).toMatchObject({
      ...{ records: 40, censored: 36, to: '2026-12-01', state: { kind: 'ready' } },
      ...{ reading: { at: 1500, atRisk: 36 }, calibrated: 0.9 },
    });
    // No censoring before the point: 36 of 40. The log(-log) limits worked by hand from S = 0.9, error sqrt(0.9 x 0.1 / 40).
    expect(estimate.reading?.chance).toBeCloseTo(0.9, 12);
    expect(estimate.reading?.low).toBeCloseTo(0.755, 3);
    expect(estimate.reading?.high).toBeCloseTo(0.961, 3);
    expect(estimate.says).toBe(
      "of 40 outpatients who were not asked, 90 % kept still for 25 min (76 to 96 %); the policy's own figure is 93 %",
    );
  });

  it('holds only those who were not asked against a prior, and the others against what was said', () => {
    const said = { statedS: 1200, saidBy: 'carer' } as const;
    const records = [...forty, ...many(30, still(900, false, said))];
    expect(spanOf(records, 'still', 'outpatient').records).toBe(40);
    const statement = spanOf(records, 'still', 'said by carer');
    expect(statement).toMatchObject({ records: 30, censored: 0, reading: { at: 1, chance: 0 } });
    expect(statement.curve.lastTime).toBe(0.75);
  });

  it('too few records change nothing, and the number asked for is the policy’s', () => {
    const few = forty.slice(0, 29);
    expect(spanOf(few, 'still', 'outpatient').state).toEqual({ kind: 'too few', least: 30 });
    const under = signed(sign());
    expect(withLearned(under, learn(few, under))).toBe(under);
    const less: SitePolicy = {
      ...under,
      learning: { ...under.learning, leastRecords: { ...policy.learning.leastRecords, value: 20 } },
    };
    expect(withLearned(less, learn(few, less)).tolerance.still.outpatient.basis).toBe(
      'own records',
    );
  });

  it('a curve that ends before the point changes nothing, unless the signature reads it earlier', () => {
    const short = [...many(4, still(300, false)), ...many(36, still(785, true))];
    const estimate = spanOf(short, 'still', 'outpatient');
    expect(estimate.state).toEqual({ kind: 'too short', reaches: 780 });
    expect(estimate.calibrated).toBeUndefined();
    const plain = signed(sign());
    expect(withLearned(plain, learn(short, plain))).toBe(plain);
    const earlier = signed(sign({ readAtS: 720 }));
    const now = withLearned(earlier, learn(short, earlier)).tolerance.still.outpatient;
    expect(now.value.atS).toBe(720);
    expect(now.value.chance).toBeCloseTo(0.9, 12);
    const beyond = signed(sign({ readAtS: 900 }));
    expect(withLearned(beyond, learn(short, beyond))).toBe(beyond);
  });

  it('who moved early is known for good: a curve that has come down to nothing is read to the end', () => {
    const all = many(40, still(300, false));
    expect(spanOf(all, 'still', 'outpatient').reading).toMatchObject({ at: 1500, chance: 0 });
    // Half moved, and the rest were last seen at 13 min: of 25 min nothing is known.
    const half = [...many(20, still(100, false)), ...many(20, still(785, true))];
    expect(spanOf(half, 'still', 'outpatient').state).toEqual({ kind: 'too short', reaches: 780 });
  });

  it('nobody moved: never a certainty, and less sure the fewer were followed', () => {
    const sure = (n: number) =>
      spanOf(many(n, still(1800, true)), 'still', 'outpatient').calibrated!;
    expect(sure(30)).toBeCloseTo(0.5 ** (1 / 30), 12);
    expect(sure(30)).toBeLessThan(sure(300));
    expect(sure(300)).toBeLessThan(1);
  });

  it('pieces are not added up where the policy has another shape than a steady risk', () => {
    const rising: SitePolicy = {
      ...policy,
      movement: { ...policy.movement, shape: { ...policy.movement.shape, value: 1.5 } },
    };
    expect(spanOf(forty, 'still', 'outpatient', rising).state.kind).toBe('not to be replaced');
  });

  it('a change over time shows: newer records against older', () => {
    const worse = [
      ...many(20, still(1800, true, { on: '2026-11-01' })),
      ...many(20, still(400, false, { on: '2026-12-01' })),
    ];
    expect(spanOf(worse, 'still', 'outpatient').drift?.chance).toBeLessThan(0.001);
    const same = [...worse.slice(0, 20), ...many(20, still(1800, true))];
    expect(spanOf(same, 'still', 'outpatient').drift?.chance).toBe(1);
  });

  it('with no records every figure is there, and every one is the prior', () => {
    const learned = learn([], policy);
    expect(learned.spans.length).toBe(3 + 3 + 4 + 2 + 4 + 2 + 4);
    expect(learned.spans.every((s) => s.state.kind === 'no records')).toBe(true);
    expect(withLearned(policy, learned)).toBe(policy);
  });
});

describe('switched on by a signature', () => {
  const under = signed(sign());

  it('plans as the records say, and says whose they are', () => {
    const now = withLearned(under, learn(forty, under));
    expect(now.tolerance.still.outpatient).toMatchObject({
      ...{ value: { atS: 1500 }, basis: 'own records' },
    });
    expect(profileOf(unasked, now).movement(1500)).toBeCloseTo(0.9, 9);
    expect(profileOf(unasked, now).says.still).toMatch(
      /90 % keep still for 25 min \(this site's own records: 40 exams, 36 of them ended first, to 2026-12-01, signed by Lead technologist on 2026-12-02; before, the policy's figure was 93 % at 25 min/,
    );
    // Others are left as they were.
    expect(now.tolerance.still.inpatient).toBe(policy.tolerance.still.inpatient);
    expect(now.movement).toBe(policy.movement);
  });

  it('a signature counts for the records up to its day; later ones wait for the next', () => {
    const later = [...forty, ...many(40, still(60, false, { on: '2026-12-03' }))];
    const now = withLearned(under, learn(later, under));
    expect(now.tolerance.still.outpatient.value.chance).toBeCloseTo(0.9, 12);
    expect(spanOf(later, 'still', 'outpatient', under).reading?.chance).toBeLessThan(0.5);
  });

  it('without one, records of any number change nothing', () => {
    expect(withLearned(policy, learn([...forty, ...forty, ...forty], policy))).toBe(policy);
  });

  it('children, holds, bearing and statements each in their own place', () => {
    const child = many(40, still(1800, true, { group: 'child under 7' }));
    const hold = (seconds: number, censored: boolean) =>
      still(seconds, censored, { kind: 'hold', group: 'adult' });
    const holds = [...many(10, hold(10, false)), ...many(40, hold(16, true))];
    const stays = [
      ...many(10, still(600, false, { kind: 'stay', group: 'claustrophobic' })),
      ...many(30, still(2000, true, { kind: 'stay', group: 'claustrophobic' })),
    ];
    const saidBy = 'patient' as const;
    const said = [
      ...many(20, still(300, false, { statedS: 600, saidBy })),
      ...many(20, still(900, true, { statedS: 600, saidBy })),
    ];
    const all = signed(
      sign({ group: 'child under 7' }),
      sign({ kind: 'hold', group: 'adult' }),
      sign({ kind: 'stay', group: 'claustrophobic' }),
      sign({ group: 'said by patient' }),
    );
    const now = withLearned(all, learn([...child, ...holds, ...stays, ...said], all));
    const four = profileOf({ ...unasked, ageYears: 4 }, now);
    expect(four.movement(1200)).toBeCloseTo(0.5 ** (1 / 40), 9);
    // 40 of 50 held to the span planned for, so the mean stays what it was to the span's own precision.
    expect(now.tolerance.holdAdult.value.meanS).toBeCloseTo(24, 1);
    const anxious = profileOf({ ...unasked, conditions: ['claustrophobia'] }, now);
    expect(anxious.stay(1800)).toBeCloseTo(0.75, 9);
    const patient = { ...calm, still: { kind: 'stated', seconds: 600 } } as const;
    expect(profileOf(patient, now).movement(600)).toBeCloseTo(0.5, 9);
    expect(profileOf(patient, now).says.still).toContain("this site's own records");
    // What the same patient said about the breath is still held to the policy's figure.
    expect(profileOf(patient, now).hold(20)).toBeCloseTo(0.8, 9);
  });

  it('getting in: mean and variation of walking outpatients, for all who come', () => {
    const entry = (seconds: number, group = 'outpatient, walking') =>
      still(seconds, false, { kind: 'entry', group });
    const records = [
      ...many(20, entry(200)),
      ...many(20, entry(400)),
      entry(900, 'inpatient, bed'),
    ];
    const on = signed(sign({ kind: 'entry', group: 'outpatient, walking' }));
    const learned = learn(records, on);
    expect(learned.times.map((t) => [t.group, t.records, t.prior?.meanS])).toEqual([
      ['outpatient, walking', 40, 240],
      ['inpatient, bed', 1, 240 + 252 + 120],
    ]);
    // Standard deviation of 20 times 200 and 20 times 400: 101.27 s.
    expect(withLearned(on, learned).time.entry).toMatchObject({
      ...{ value: { meanS: 300, cv: 0.338 }, basis: 'own records' },
    });
  });

  it('an estimate can be tried before anybody signs', () => {
    const estimate = spanOf(forty, 'still', 'outpatient');
    expect(profileOf(unasked, switchedOn(policy, estimate)).movement(1500)).toBeCloseTo(0.9, 9);
  });
});
