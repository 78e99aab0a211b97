import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { rankOf, type SitePolicy } from '../../src/exams/index.js';
import { planExam, prepare, type ExamRequest } from '../../src/planning/index.js';
import { chooseExactly } from '../../src/planning/solver/exact.js';
import type { SpanStatement, ToleranceStatement } from '../../src/tolerance/index.js';
import { at15, at3, calm, ground, requestFor, shipped, under } from './ground.js';

// No source is needed for these: they hold for any right planner, whatever its numbers.

const span = (least: number, most: number): fc.Arbitrary<SpanStatement> =>
  fc.oneof(
    { weight: 1, arbitrary: fc.constant<SpanStatement>({ kind: 'not asked' }) },
    {
      weight: 4,
      arbitrary: fc
        .integer({ min: least, max: most })
        .map((seconds) => ({ kind: 'stated' as const, seconds })),
    },
  );

const statement: fc.Arbitrary<ToleranceStatement> = fc.record({
  still: span(5, 3000),
  hold: span(0, 30),
  stay: span(300, 6000),
  saidBy: fc.constantFrom('patient' as const, 'carer' as const, 'referrer' as const),
  followsInstructions: fc.constantFrom('yes' as const, 'no' as const, 'not asked' as const),
  conditions: fc.subarray(['claustrophobia', 'tremor', 'breathless', 'pain', 'confused'] as const),
  patientClass: fc.constantFrom('outpatient' as const, 'inpatient' as const, 'emergency' as const),
  ageYears: fc.integer({ min: 1, max: 95 }),
});

const request: fc.Arbitrary<ExamRequest> = fc
  .record({
    examId: fc.constantFrom(...shipped.exams.keys()),
    tolerance: statement,
    slotMin: fc.integer({ min: 10, max: 75 }),
    contrast: fc.constantFrom('approved' as const, 'not approved' as const, 'undecided' as const),
  })
  .map(({ examId, tolerance, slotMin, contrast }) =>
    requestFor(examId, { tolerance, slotS: slotMin * 60, contrast }),
  );

/** The best answer as a list to compare: weights answered diagnostically, then targeted, then screening. */
function best(given: ExamRequest, on = ground, scanner = at3): readonly [number, number, number] {
  const ready = prepare(given, scanner, on);
  if (ready.kind === 'refused') throw new Error(JSON.stringify(ready.problems));
  const { objective } = chooseExactly(ready.value.problem);
  return [objective.diagnostic, objective.targeted, objective.screening];
}

function notWorse(better: readonly number[], worse: readonly number[]): boolean {
  for (let n = 0; n < better.length; n++) {
    const difference = (better[n] ?? 0) - (worse[n] ?? 0);
    if (difference !== 0) return difference > 0;
  }
  return true;
}

const stated = (s: SpanStatement): s is Extract<SpanStatement, { kind: 'stated' }> =>
  s.kind === 'stated';
const runs = { numRuns: 150, seed: 41 };

describe('more never gives less', () => {
  it('a longer slot never lowers the best answer', () => {
    fc.assert(
      fc.property(request, fc.integer({ min: 1, max: 40 }), (r, more) =>
        notWorse(best({ ...r, slotS: r.slotS + more * 60 }), best(r)),
      ),
      runs,
    );
  });

  it('more stillness never lowers it', () => {
    fc.assert(
      fc.property(request, fc.integer({ min: 1, max: 1200 }), (r, more) => {
        const { still } = r.tolerance;
        if (!stated(still)) return true;
        const calmer = {
          ...r,
          tolerance: { ...r.tolerance, still: { ...still, seconds: still.seconds + more } },
        };
        return notWorse(best(calmer), best(r));
      }),
      runs,
    );
  });

  it('a longer breath-hold never lowers it', () => {
    const held = request.map((r) => ({ ...r, examId: 'liver' }));
    fc.assert(
      fc.property(fc.oneof(held, request), fc.integer({ min: 1, max: 15 }), (r, more) => {
        const { hold } = r.tolerance;
        if (!stated(hold)) return true;
        const longer = {
          ...r,
          tolerance: { ...r.tolerance, hold: { ...hold, seconds: hold.seconds + more } },
        };
        return notWorse(best(longer), best(r));
      }),
      runs,
    );
  });

  it('a longer stay never lowers it', () => {
    fc.assert(
      fc.property(request, fc.integer({ min: 60, max: 3000 }), (r, more) => {
        const { stay } = r.tolerance;
        if (!stated(stay)) return true;
        const longer = {
          ...r,
          tolerance: { ...r.tolerance, stay: { ...stay, seconds: stay.seconds + more } },
        };
        return notWorse(best(longer), best(r));
      }),
      runs,
    );
  });
});

describe('a stricter policy never raises a grade', () => {
  const { policy } = shipped;
  const stricter: [string, SitePolicy][] = [
    [
      'clean chance',
      {
        ...policy,
        movement: {
          ...policy.movement,
          cleanChance: {
            ...policy.movement.cleanChance,
            value: { diagnostic: 0.9, targeted: 0.8, screening: 0.6 },
          },
        },
      },
    ],
    [
      'contrast-to-noise',
      {
        ...policy,
        physics: {
          ...policy.physics,
          relativeContrastToNoise: {
            ...policy.physics.relativeContrastToNoise,
            value: { diagnostic: 0.8, targeted: 0.6, screening: 0.3 },
          },
        },
      },
    ],
    [
      'border',
      {
        ...policy,
        physics: {
          ...policy.physics,
          borderOverCaliper: {
            ...policy.physics.borderOverCaliper,
            value: { diagnostic: 0.5, targeted: 0.8, screening: 1.2 },
          },
        },
      },
    ],
    [
      'catalogue',
      {
        ...policy,
        catalogue: {
          ...policy.catalogue,
          entries: policy.catalogue.entries.map((e) =>
            rankOf(e.atMost) > rankOf('screening') ? { ...e, atMost: 'screening' as const } : e,
          ),
        },
      },
    ],
    [
      'finish confidence',
      {
        ...policy,
        time: {
          ...policy.time,
          finishConfidence: { ...policy.time.finishConfidence, value: 0.98 },
        },
      },
    ],
    [
      'stay confidence',
      {
        ...policy,
        time: { ...policy.time, stayConfidence: { ...policy.time.stayConfidence, value: 0.95 } },
      },
    ],
  ];
  it.each(stricter)('%s', (_what, strict) => {
    const strictGround = under(strict);
    fc.assert(
      fc.property(request, (r) => {
        return notWorse(best(r), best(r, strictGround));
      }),
      { numRuns: 60, seed: 5 },
    );
  });
});

describe('what does not matter', () => {
  it('the order in which questions are asked', async () => {
    const exam = shipped.exams.get('brain-general');
    const ids = exam?.questions.map((q) => q.id) ?? [];
    const forward = await planExam(requestFor('brain-general', { questionIds: ids }), at3, ground);
    const backward = await planExam(
      requestFor('brain-general', { questionIds: [...ids].reverse() }),
      at3,
      ground,
    );
    expect(backward).toEqual(forward);
  });

  it('asking for all questions by name or by leaving the field empty', async () => {
    const ids = shipped.exams.get('knee')?.questions.map((q) => q.id) ?? [];
    expect(await planExam(requestFor('knee', { questionIds: ids }), at15, ground)).toEqual(
      await planExam(requestFor('knee'), at15, ground),
    );
  });

  it('planning the same request twice', async () => {
    const r = requestFor('liver', { tolerance: { ...calm, hold: { kind: 'stated', seconds: 9 } } });
    expect(await planExam(r, at3, ground)).toEqual(await planExam(r, at3, ground));
  });
});
