import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  answeredSoFar,
  doneViews,
  foldEvents,
  replan,
  type ConsoleEvent,
  type ConsoleExam,
  type ConsoleHappening,
} from '../../src/console/index.js';
import { examOf } from '../../src/planning/index.js';
import type { ToleranceStatement } from '../../src/tolerance/index.js';
import { at3, calm, ground, requestFor, shipped } from '../planning/ground.js';

// These hold for any right console: the rules are the issue's own, the numbers the planner's.

function consoleFor(examId: string, tolerance: ToleranceStatement = calm): ConsoleExam {
  const request = requestFor(examId, { tolerance });
  const found = examOf(request, shipped);
  if (found.kind === 'refused') throw new Error(examId);
  return { request, ...found.value, scanner: at3, ground };
}

function log(...happenings: (ConsoleHappening & { atS: number })[]): ConsoleEvent[] {
  return happenings.map((h, n) => ({ ...h, seq: n + 1 }));
}

const slotS = 1800;
const gradesOf = (exam: ConsoleExam, events: readonly ConsoleEvent[]) =>
  replan(exam, foldEvents(events, exam.request.tolerance), slotS);

describe('the log', () => {
  const started = { kind: 'started', viewId: 'axial-t2', sequenceId: 'head-ax-t2-fse' } as const;

  it('a mis-tap taken back counts for nothing, and taking that back brings it in again', () => {
    const events = log(
      { ...started, atS: 10 },
      { kind: 'clean', atS: 60 },
      { kind: 'undone', taken: 2, atS: 62 },
    );
    expect(foldEvents(events, calm).tries).toEqual([]);
    expect(foldEvents(events, calm).running?.viewId).toBe('axial-t2');
    const again = [...events, { kind: 'undone', taken: 3, atS: 63, seq: 4 } as ConsoleEvent];
    expect(foldEvents(again, calm).tries).toHaveLength(1);
  });

  it('time never runs backwards, whatever the device says', () => {
    const state = foldEvents(log({ kind: 'entered', atS: 100 }, { ...started, atS: 40 }), calm);
    expect(state.nowS).toBe(100);
    expect(state.running?.sinceS).toBe(100);
  });

  it('movement after 20 seconds lowers the still span to 20, and never raises it', () => {
    const once = foldEvents(log({ ...started, atS: 10 }, { kind: 'moved', atS: 30 }), calm);
    expect(once.tolerance.still).toEqual({ kind: 'stated', seconds: 20 });
    const restless = { ...calm, still: { kind: 'stated', seconds: 8 } as const };
    const later = foldEvents(log({ ...started, atS: 10 }, { kind: 'moved', atS: 90 }), restless);
    expect(later.tolerance.still).toEqual({ kind: 'stated', seconds: 8 });
  });

  it('a hold that fails after 8 seconds is a hold span of 8', () => {
    const state = foldEvents(
      log({ ...started, atS: 0 }, { kind: 'hold failed', afterS: 8, atS: 9 }),
      calm,
    );
    expect(state.tolerance.hold).toEqual({ kind: 'stated', seconds: 8 });
    expect(state.tries[0]?.outcome).toBe('hold failed');
  });

  it('nothing after the end changes anything but the clock', () => {
    const ended = log({ ...started, atS: 0 }, { kind: 'ended', atS: 10 });
    const more = [...ended, { ...started, atS: 20, seq: 3 } as ConsoleEvent];
    expect(foldEvents(more, calm)).toEqual({ ...foldEvents(ended, calm), nowS: 20 });
  });
});

describe('a child who moves twice', () => {
  const child: ToleranceStatement = {
    still: { kind: 'stated', seconds: 120 },
    hold: { kind: 'stated', seconds: 0 },
    stay: { kind: 'stated', seconds: 1500 },
    saidBy: 'carer',
    followsInstructions: 'no',
    conditions: ['small child'],
    patientClass: 'outpatient',
    ageYears: 4,
  };
  const exam = consoleFor('brain-ventricles', child);
  const begin = gradesOf(exam, log({ kind: 'entered', atS: 240 }));

  it('begins with full quality', () => {
    expect(begin.next[0]?.sequenceId).not.toContain('-ss-');
    expect(begin.reachable.find((g) => g.questionId === 'ventricular-size')?.grade).toBe(
      'diagnostic',
    );
    expect(begin.answered.every((g) => g.grade === 'none')).toBe(true);
  });

  const first = begin.next[0]!;
  const moves = log(
    { kind: 'entered', atS: 240 },
    { kind: 'started', viewId: first.viewId!, sequenceId: first.sequenceId!, atS: 300 },
    { kind: 'moved', atS: 315 },
    { kind: 'started', viewId: first.viewId!, sequenceId: first.sequenceId!, atS: 340 },
    { kind: 'moved', atS: 346 },
  );
  const after = gradesOf(exam, moves);

  it('gives full quality up and goes for the ventricles as targeted, in words', () => {
    const ventricles = after.reachable.find((g) => g.questionId === 'ventricular-size');
    expect(ventricles?.grade).toBe('targeted');
    expect(ventricles?.words).toContain('this question only');
    expect(after.next.some((s) => s.sequenceId?.includes('-ss-'))).toBe(true);
  });

  it('says what is lost if it stops now, and ends with the ventricles answered and the rest owed', () => {
    expect(after.lostIfStopped.join(' ')).toMatch(
      /Ventricular size[^:]*: now not answered; going on could make it targeted: this question only/,
    );
    const views = after.next.filter((s) => s.sequenceId?.includes('-ss-'));
    let atS = 360;
    const done = views.flatMap((s) => [
      { kind: 'started' as const, viewId: s.viewId!, sequenceId: s.sequenceId!, atS: (atS += 30) },
      { kind: 'clean' as const, atS: (atS += 25) },
    ]);
    const events = [...moves, ...done, { kind: 'ended' as const, atS: atS + 10 }].map(
      (e, n) => ({ ...e, seq: n + 1 }) as ConsoleEvent,
    );
    const end = gradesOf(exam, events);
    expect(end.answered.find((g) => g.questionId === 'ventricular-size')?.grade).toBe('targeted');
    expect(end.next).toEqual([]);
    expect(end.owed.map((g) => g.questionId)).toContain('acute-process');
    expect(end.beforeLeaving.join(' ')).toContain('this question only, not diagnostic');
  });
});

describe("choices are the technologist's", () => {
  const exam = consoleFor('brain-general');
  it('puts any view first, and says what it costs when time is short', () => {
    const late = [
      ...log(
        { kind: 'entered', atS: 240 },
        { kind: 'put first', viewId: 'sagittal-t1', atS: 1200 },
      ),
    ];
    const shown = gradesOf(exam, late);
    expect(shown.next[0]?.viewId).toBe('sagittal-t1');
    expect(shown.costOfFirst?.length).toBeGreaterThan(0);
  });
  it('never proposes what was dropped, unless it is put first again', () => {
    const dropped = gradesOf(
      exam,
      log({ kind: 'entered', atS: 240 }, { kind: 'dropped', viewId: 'axial-dwi', atS: 250 }),
    );
    expect(dropped.next.map((s) => s.viewId)).not.toContain('axial-dwi');
    const back = gradesOf(
      exam,
      log(
        { kind: 'entered', atS: 240 },
        { kind: 'dropped', viewId: 'axial-dwi', atS: 250 },
        { kind: 'put first', viewId: 'axial-dwi', atS: 260 },
      ),
    );
    expect(back.next[0]?.viewId).toBe('axial-dwi');
  });
  it('a patient who wants out is planned for two minutes more, no longer', () => {
    const shown = gradesOf(
      exam,
      log({ kind: 'entered', atS: 240 }, { kind: 'wants out', atS: 400 }),
    );
    const last = shown.next[shown.next.length - 1];
    expect((last?.inS ?? 0) + (last?.takesS ?? 0)).toBeLessThanOrEqual(130);
  });
  it('contrast given is not given again', () => {
    const tumour = consoleFor('brain-tumour-follow-up');
    const pre = tumour.exam.views.find((v) => v.contrast === 'before')!;
    const shown = gradesOf(
      tumour,
      log(
        { kind: 'entered', atS: 240 },
        { kind: 'started', viewId: pre.id, sequenceId: pre.reference, atS: 250 },
        { kind: 'clean', atS: 420 },
        { kind: 'injected', atS: 500 },
      ),
    );
    expect(shown.next.some((s) => s.kind === 'injection')).toBe(false);
    expect(
      shown.next.some(
        (s) => tumour.exam.views.find((v) => v.id === s.viewId)?.contrast === 'after',
      ),
    ).toBe(true);
  });
});

describe('1,000 generated stories', () => {
  const exams = [
    'brain-general',
    'brain-ventricles',
    'liver',
    'spine-lumbar',
    'brain-tumour-follow-up',
  ].map((id) => consoleFor(id));
  /** Happenings over an exam's own views; sequences are its candidates. */
  const happening = (exam: ConsoleExam): fc.Arbitrary<ConsoleHappening & { atS: number }> => {
    const views = exam.exam.views;
    const start = fc.nat(views.length - 1).chain((n) => {
      const view = views[n]!;
      return fc
        .constantFrom(...view.candidates)
        .map((sequenceId) => ({ kind: 'started' as const, viewId: view.id, sequenceId }));
    });
    const view = fc.constantFrom(...views.map((v) => v.id));
    const any: fc.Arbitrary<ConsoleHappening> = fc.oneof(
      { weight: 5, arbitrary: start },
      { weight: 4, arbitrary: fc.constant({ kind: 'clean' as const }) },
      { weight: 2, arbitrary: fc.constant({ kind: 'moved' as const }) },
      fc.nat(30).map((afterS) => ({ kind: 'hold failed' as const, afterS })),
      fc.constant({ kind: 'stopped' as const }),
      fc.constant({ kind: 'injected' as const }),
      fc.constant({ kind: 'wants out' as const }),
      fc.constant({ kind: 'entered' as const }),
      view.map((viewId) => ({ kind: 'put first' as const, viewId })),
      view.map((viewId) => ({ kind: 'dropped' as const, viewId })),
      fc.nat(12).map((taken) => ({ kind: 'undone' as const, taken })),
      fc.integer({ min: 5, max: 1200 }).map((seconds) => ({
        kind: 'statement' as const,
        still: { kind: 'stated' as const, seconds },
      })),
    );
    return fc.tuple(any, fc.integer({ min: -60, max: 2400 })).map(([h, atS]) => ({ ...h, atS }));
  };
  const story = fc
    .constantFrom(...exams)
    .chain((exam) =>
      fc.tuple(fc.constant(exam), fc.array(happening(exam), { minLength: 1, maxLength: 12 })),
    );

  it('time never runs backwards, replaying gives the same state, and no grade rises without a clean acquisition', () => {
    fc.assert(
      fc.property(story, ([exam, happenings]) => {
        const events = log(...happenings);
        const said = exam.request.tolerance;
        expect(foldEvents([...events].reverse(), said)).toEqual(foldEvents(events, said));
        let beforeS = -Infinity;
        let cleanBefore = 0;
        let answeredBefore = exam.questions.map(() => 0);
        for (let n = 1; n <= events.length; n++) {
          const state = foldEvents(events.slice(0, n), said);
          expect(state.nowS).toBeGreaterThanOrEqual(beforeS);
          beforeS = state.nowS;
          const answered = answeredSoFar(exam, doneViews(exam, state));
          const clean = state.tries.filter((t) => t.outcome === 'clean').length;
          if (clean <= cleanBefore)
            answered.forEach((rank, q) => expect(rank).toBeLessThanOrEqual(answeredBefore[q]!));
          cleanBefore = clean;
          answeredBefore = [...answered];
        }
      }),
      { numRuns: 1000, seed: 12 },
    );
  });

  it('every re-plan fits what is left, repeats nothing dropped, and never says a low grade without its words', () => {
    fc.assert(
      fc.property(story, ([exam, happenings]) => {
        const state = foldEvents(log(...happenings), exam.request.tolerance);
        const shown = replan(exam, state, slotS);
        if (shown.next.length > 0) {
          expect(shown.chanceToFinish).toBeGreaterThanOrEqual(
            shipped.policy.time.finishConfidence.value - 1e-6,
          );
        }
        for (const step of shown.next) {
          if (step.viewId !== undefined) expect(state.dropped.has(step.viewId)).toBe(false);
          expect(step.inS).toBeGreaterThanOrEqual(0);
        }
        for (const g of [...shown.answered, ...shown.reachable, ...shown.owed]) {
          if (g.grade === 'screening') expect(g.words).toContain('not diagnostic');
          if (g.grade === 'targeted') expect(g.words).toContain('this question only');
        }
      }),
      { numRuns: 300, seed: 13 },
    );
  });
});
