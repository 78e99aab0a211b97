import { beforeAll, describe, expect, it } from 'vitest';
import type { Department } from '../../src/day/index.js';
import type { ExamRequest } from '../../src/planning/index.js';
import { randomStream } from '../../src/shared/index.js';
import { fillAndLive, type FilledDays } from '../../src/throughput/index.js';
import { book, department, ground, requests } from './ground.js';

const rules = [
  { kind: 'tolerance', mostMin: 60 },
  { kind: 'fixed', minutes: 30 },
  { kind: 'fixed', minutes: 45 },
] as const;

const lived = (asked: readonly ExamRequest[], where: Department) =>
  rules.map((rule) =>
    fillAndLive(rule, {
      ...{ requests: asked, department: where, ground, book },
      ...{ repeats: 60, seed: 1, iterations: 600 },
    }),
  );

/** The policy promises nine of ten exams inside their slot. */
const promised = 0.1;

describe('the same requests filled into the same days under three slot rules', () => {
  let crowded: readonly FilledDays[];
  beforeAll(() => {
    // Everybody can come on the one day.
    const anyTime = requests.map(({ dueDate: _, ...r }) => ({
      ...r,
      canCome: { partOfDay: 'any' as const },
    }));
    crowded = lived(anyTime, { ...department, days: [department.days[0]!] });
  });

  it('on a crowded demo day, slots by tolerance place more patients and answer more questions', () => {
    const [fitted, thirty, fortyFive] = crowded;
    expect(fitted!.placed).toBeGreaterThan(thirty!.placed);
    expect(thirty!.placed).toBeGreaterThan(fortyFive!.placed);
    expect(fitted!.diagnostic.low).toBeGreaterThan(thirty!.diagnostic.high);
    expect(thirty!.diagnostic.low).toBeGreaterThan(fortyFive!.diagnostic.high);
  });

  it('exams run over no more often than the plan promised, under every rule', () => {
    for (const { overruns, placed } of crowded)
      expect(overruns.low / placed).toBeLessThan(promised);
  });

  it('on generated departments no fixed rule answers more, and every promise holds', () => {
    for (let seed = 1; seed <= 5; seed++) {
      const next = randomStream(seed, 'department');
      const pick = <T>(list: readonly T[]): T => list[Math.floor(next() * list.length)]!;
      const scanners = Array.from({ length: 1 + Math.floor(3 * next()) }, (_, n) => {
        const like = pick(department.scanners);
        const fromMin = 8 * 60 + 5 * Math.floor(12 * next());
        return {
          ...like,
          id: `g${n}`,
          hours: [{ fromMin, toMin: fromMin + 240 + 5 * Math.floor(30 * next()) }],
          breaks: [],
        };
      });
      const asked = Array.from({ length: 14 * scanners.length }, (_each, n): ExamRequest => {
        const { dueDate: _, ...like } = pick(requests);
        return { ...like, id: `G-${n}`, canCome: { partOfDay: 'any' } };
      });
      const [fitted, ...fixed] = lived(asked, {
        ...department,
        scanners,
        days: ['2026-12-08'],
      });
      for (const rule of fixed) {
        // What fits a fixed slot may be chosen by tolerance too; luck and the search leave a little room.
        expect(fitted!.diagnostic.mean).toBeGreaterThan(0.98 * rule.diagnostic.mean);
        expect(fitted!.placed).toBeGreaterThanOrEqual(rule.placed - 1);
      }
      for (const { overruns, placed } of [fitted!, ...fixed])
        expect(overruns.low / Math.max(1, placed)).toBeLessThan(promised);
    }
  });
});
