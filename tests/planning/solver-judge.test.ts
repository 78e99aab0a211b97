import { describe, expect, it } from 'vitest';
import { atSeconds, mixture } from '../../src/planning/distribution.js';
import {
  compareObjectives,
  judgeChoice,
  type ChoiceProblem,
} from '../../src/planning/solver/problem.js';

const candidate = (
  id: string,
  ranks: readonly (0 | 1 | 2 | 3)[],
  nominalS: number,
  quality = 80,
) => ({
  id,
  ranks,
  quality,
  nominalS,
  time: mixture([
    { weight: 0.9, of: atSeconds(nominalS) },
    { weight: 0.1, of: atSeconds(2 * nominalS) },
  ]),
});

/** Two views before and after contrast; one question on both, one on the first. */
const exam: ChoiceProblem = {
  questions: [
    { id: 'both', weight: 5, needs: [0, 1] },
    { id: 'first', weight: 3, needs: [0] },
  ],
  views: [
    {
      id: 'before',
      candidates: [candidate('slow', [3, 3], 200), candidate('quick', [2, 1], 60, 50)],
    },
    { id: 'after', candidates: [candidate('slow', [3, 0], 200)], requiresView: 0 },
  ],
  base: atSeconds(300),
  baseNominalS: 40,
  shared: [{ views: [1], nominalS: 90, time: atSeconds(90) }],
  slotS: 900,
  confidence: 0.8,
  stayLimitS: 600,
};

describe('checking a choice row by row', () => {
  // Source: by hand.
  it('adds up grades, quality, seconds and the chance', () => {
    const { feasible, choice } = judgeChoice(exam, [0, 0]);
    expect(feasible).toBe(true);
    expect(choice.ranks).toEqual([3, 3]);
    expect(choice.objective).toEqual({
      diagnostic: 8,
      targeted: 8,
      screening: 8,
      quality: 160,
      nominalS: 490,
    });
    // 300 + 90 + 400 = 790 without a repeat; one repeat makes 990.
    expect(choice.chance).toBeCloseTo(0.81, 12);
  });

  // Source: by hand; the lowest over the views a question needs.
  it('grades a question by its weakest view', () => {
    expect(judgeChoice(exam, [1, 0]).choice.ranks).toEqual([2, 1]);
    expect(judgeChoice(exam, [0, -1]).choice.ranks).toEqual([0, 3]);
  });

  // Source: by hand, one row broken at a time.
  it('names every row that does not hold', () => {
    const broken = (problem: ChoiceProblem, picks: readonly number[]) =>
      judgeChoice(problem, picks).broken.join('\n');
    expect(broken(exam, [-1, 0])).toMatch(/serves no answer/);
    expect(broken(exam, [-1, 0])).toMatch(/needs view before/);
    expect(broken({ ...exam, slotS: 989, confidence: 0.9 }, [0, 0])).toMatch(/probability 0.8100/);
    expect(broken({ ...exam, stayLimitS: 529 }, [0, 0])).toMatch(/530 s .* stay limit of 529/);
    expect(broken({ ...exam, stayLimitS: 530 }, [0, 0])).toBe('');
    expect(broken(exam, [7, -1])).toMatch(/no candidate 7/);
    expect(broken(exam, [0])).toMatch(/1 picks for 2 views/);
    expect(broken({ ...exam, slotS: 10 }, [-1, -1])).toBe('');
  });

  // Source: the design's lexicographic order.
  it('compares goals one after the other', () => {
    const base = { diagnostic: 5, targeted: 5, screening: 5, quality: 100, nominalS: 300 };
    expect(compareObjectives(base, { ...base })).toBe(0);
    expect(compareObjectives({ ...base, diagnostic: 6, quality: 0 }, base)).toBeGreaterThan(0);
    expect(compareObjectives({ ...base, screening: 4, quality: 900 }, base)).toBeLessThan(0);
    expect(compareObjectives({ ...base, nominalS: 299 }, base)).toBeGreaterThan(0);
  });
});
