import { afterAll, describe, expect, it } from 'vitest';
import { chooseExactly } from '../../src/planning/solver/exact.js';
import { linearSolver } from '../../src/planning/solver/linear.js';
import { judgeChoice } from '../../src/planning/solver/problem.js';
import { highsChoice, loadHighsOnce } from '../oracles/highs-choice.js';
import { bestByTryingAll, inventedExam, type InstanceSize } from './instances.js';

const linear = linearSolver({ wallClockMs: 20_000 });
afterAll(() => linear.close());

/** Seeds are fixed; 220 instances together. */
const families: readonly (InstanceSize & { readonly seeds: readonly [number, number] })[] = [
  { views: 6, candidates: 4, questions: 4, certain: true, seeds: [100, 180] },
  { views: 10, candidates: 5, questions: 5, certain: true, seeds: [200, 250] },
  { views: 6, candidates: 4, questions: 4, seeds: [300, 360] },
  { views: 9, candidates: 5, questions: 5, seeds: [400, 430] },
];

describe('choosing the sequence set', () => {
  for (const { seeds, ...size } of families) {
    const times = size.certain ? 'certain' : 'random';
    // Source: second solver, HiGHS (published mixed-integer solver), stage by stage.
    it(`agrees with HiGHS, exact and linear, on ${size.views} views with ${times} times`, async () => {
      const highs = await loadHighsOnce();
      for (let seed = seeds[0]; seed < seeds[1]; seed++) {
        const problem = inventedExam(seed, size);
        const expected = highsChoice(highs, problem).objective;
        const exact = chooseExactly(problem);
        const picked = await linear.choose(problem);
        expect({ seed, ...exact.objective }).toEqual({ seed, ...expected });
        expect({ seed, ...picked.objective }).toEqual({ seed, ...expected });
        expect(picked.provedBy).toMatch(/^linear programme/);
        expect(exact.provedBy).toMatch(/^exact branch and bound/);
        expect(judgeChoice(problem, exact.picks).broken).toEqual([]);
        expect(judgeChoice(problem, picked.picks).broken).toEqual([]);
      }
    });
  }

  // Source: exhaustive search over every combination of picks.
  it('is the best of all combinations on small exams', async () => {
    let answered = 0;
    for (let seed = 500; seed < 600; seed++) {
      const problem = inventedExam(seed, {
        views: 4,
        candidates: 3,
        questions: 3,
        certain: seed % 3 === 0,
      });
      const expected = bestByTryingAll(problem).objective;
      expect({ seed, ...chooseExactly(problem).objective }).toEqual({ seed, ...expected });
      expect({ seed, ...(await linear.choose(problem)).objective }).toEqual({ seed, ...expected });
      if (expected.screening > 0) answered++;
    }
    expect(answered).toBeGreaterThan(50);
  });
});
