import { describe, expect, it } from 'vitest';
import { atSeconds, convolve } from '../../src/planning/distribution.js';
import { chooseCurve, chooseExactly } from '../../src/planning/solver/exact.js';
import { linearSolver } from '../../src/planning/solver/linear.js';
import { compareObjectives, type ChoiceProblem } from '../../src/planning/solver/problem.js';
import { withoutDominated } from '../../src/planning/solver/prune.js';
import { bestByTryingAll, inventedExam, stream } from './instances.js';

const exams = Array.from({ length: 40 }, (_, i) =>
  inventedExam(700 + i, { views: 7, candidates: 5, questions: 4, certain: i % 4 === 0 }),
);

/** The same exam with views, candidates, questions and shared times in another order. */
function shuffled(problem: ChoiceProblem, seed: number): ChoiceProblem {
  const random = stream('shuffle', seed);
  const order = (count: number): number[] => {
    const places = Array.from({ length: count }, (_, i) => i);
    for (let i = count - 1; i > 0; i--) {
      const j = Math.floor(random() * (i + 1));
      [places[i], places[j]] = [places[j]!, places[i]!];
    }
    return places;
  };
  const questionOrder = order(problem.questions.length);
  const viewOrder = order(problem.views.length);
  const newView = (old: number): number => viewOrder.indexOf(old);
  return {
    ...problem,
    questions: questionOrder.map((q) => {
      const question = problem.questions[q]!;
      return { ...question, needs: question.needs.map(newView).reverse() };
    }),
    views: viewOrder.map((v) => {
      const { requiresView, ...view } = problem.views[v]!;
      return {
        ...view,
        ...(requiresView === undefined ? {} : { requiresView: newView(requiresView) }),
        candidates: order(view.candidates.length).map((c) => {
          const candidate = view.candidates[c]!;
          return { ...candidate, ranks: questionOrder.map((q) => candidate.ranks[q]!) };
        }),
      };
    }),
    shared: problem.shared.map((s) => ({ ...s, views: s.views.map(newView).reverse() })),
  };
}

describe('properties of the best choice', () => {
  // Source: the problem's symmetry; metamorphic.
  it('does not hang on the order of views, candidates or questions', () => {
    exams.forEach((problem, i) => {
      const { objective } = chooseExactly(problem);
      for (let k = 0; k < 3; k++) {
        expect(chooseExactly(shuffled(problem, 10 * i + k)).objective).toEqual(objective);
      }
    });
  });

  // Source: more room only adds allowed choices; metamorphic.
  it('never gets worse with a longer slot, a longer stay, or less confidence asked', () => {
    let better = 0;
    for (const problem of exams) {
      const ladder = (steps: readonly Partial<ChoiceProblem>[]): void => {
        let before = chooseExactly({ ...problem, ...steps[0] });
        for (const step of steps.slice(1)) {
          const now = chooseExactly({ ...problem, ...step });
          const gain = compareObjectives(now.objective, before.objective);
          expect(gain).toBeGreaterThanOrEqual(0);
          if (gain > 0) better++;
          before = now;
        }
      };
      ladder([0, 540, 541, 900, 1200, 1500, 2100, 3000, 6000].map((slotS) => ({ slotS })));
      ladder([0, 59, 300, 600, 900, 1800, 7200].map((stayLimitS) => ({ stayLimitS })));
      ladder([1, 0.99, 0.95, 0.9, 0.7, 0.5].map((confidence) => ({ confidence })));
    }
    expect(better).toBeGreaterThan(200);
  });

  // Source: chooseExactly at each slot.
  it('gives along the curve what it gives slot by slot, and never falls', () => {
    for (const problem of exams.slice(0, 20)) {
      const slotsS = [3600, 600, 1200, 1800, 2400, 900, 1500];
      const curve = chooseCurve(problem, slotsS);
      slotsS.forEach((slotS, i) => {
        const alone = chooseExactly({ ...problem, slotS });
        expect(curve[i]!.objective).toEqual(alone.objective);
        expect(curve[i]!.chance).toBeGreaterThanOrEqual(
          curve[i]!.picks.every((p) => p === -1) ? 0 : problem.confidence - 1e-9,
        );
      });
    }
  });

  // Source: exhaustive search with and without the dominated candidates.
  it('keeps the optimum when dominated candidates go', () => {
    let removed = 0;
    for (let seed = 800; seed < 850; seed++) {
      const invented = inventedExam(seed, { views: 3, candidates: 3, questions: 3 });
      const random = stream('worse', seed);
      // Beside every candidate one that is later, or poorer, or just the same.
      const problem = {
        ...invented,
        views: invented.views.map((view) => ({
          ...view,
          candidates: view.candidates.flatMap((candidate) => {
            const laterS = Math.floor(random() * 3) * 15;
            const worse = {
              ...candidate,
              id: `${candidate.id}-worse`,
              quality: Math.max(0, candidate.quality - Math.floor(random() * 3)),
              nominalS: candidate.nominalS + laterS,
              time: convolve(candidate.time, atSeconds(laterS)),
            };
            return random() < 0.5 ? [candidate, worse] : [worse, candidate];
          }),
        })),
      };
      const pruned = withoutDominated(problem);
      const { objective } = bestByTryingAll(problem);
      expect(bestByTryingAll(pruned.problem).objective).toEqual(objective);
      expect(bestByTryingAll(invented).objective).toEqual(objective);
      pruned.kept.forEach((kept, v) => {
        removed += problem.views[v]!.candidates.length - kept.length;
        expect(kept.length).toBeLessThanOrEqual(invented.views[v]!.candidates.length);
      });
    }
    expect(removed).toBeGreaterThan(150);
  });

  // Source: definition of the problem, "choosing nothing is always allowed".
  it('chooses nothing where the base alone misses the slot', () => {
    const problem = { ...exams[1]!, slotS: 120 };
    const choice = chooseExactly(problem);
    expect(choice.picks.every((pick) => pick === -1)).toBe(true);
    expect(choice.chance).toBe(0);
    expect(choice.objective.nominalS).toBe(0);
  });

  // Source: definition of the problem; a view that was ruled out altogether.
  it('leaves a question unanswered that needs a view there is none of, and answers the rest', async () => {
    const linear = linearSolver({ wallClockMs: 10_000 });
    for (const exam of exams.slice(0, 10)) {
      const problem = {
        ...exam,
        questions: exam.questions.map((question, q) =>
          q === 0 ? { ...question, needs: [-1, ...question.needs] } : question,
        ),
      };
      const without = {
        ...exam,
        questions: exam.questions.map((question, q) =>
          q === 0 ? { ...question, needs: [] } : question,
        ),
      };
      const { objective } = chooseExactly(without);
      expect(chooseExactly(problem).objective).toEqual(objective);
      const picked = await linear.choose(problem);
      expect(picked.objective).toEqual(objective);
      expect(picked.provedBy).toMatch(/^linear programme/);
    }
    await linear.close();
  });

  // Source: by definition; an answer cut short may not call itself proved.
  it('says when it was stopped before the proof', () => {
    const problem = { ...exams[2]!, slotS: 1500 };
    const stopped = chooseExactly(problem, { nodeLimit: 3 });
    expect(stopped.provedBy).toMatch(/not proved/);
    expect(
      compareObjectives(chooseExactly(problem).objective, stopped.objective),
    ).toBeGreaterThanOrEqual(0);
  });

  // Source: house rule that what is too large is refused, with a way out.
  it('refuses more than thirty candidates of a view that none beats', () => {
    const one = exams[0]!;
    const view = one.views[0]!;
    const candidates = Array.from({ length: 31 }, (_, i) => ({
      ...view.candidates[0]!,
      id: `c${i}`,
      quality: i,
      nominalS: 100 + i,
    }));
    const problem = { ...one, views: [{ ...view, candidates }, ...one.views.slice(1)] };
    expect(() => chooseExactly(problem)).toThrow(/at most 30/);
  });
});
