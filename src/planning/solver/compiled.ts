import { ProblemError } from '../../shared/index.js';
import { earliestEnvelope, equivalentS, sparseTime, type SparseTime } from './spent-time.js';
import type { ChoiceProblem } from './problem.js';

/** A choice problem laid out for searching: bit masks over candidates and views, sparse times. */
export interface Compiled {
  readonly problem: ChoiceProblem;
  /** Bit mask of all candidates, per view. */
  readonly everything: readonly number[];
  /** `eligible[v][q][g]`: candidates of view v that let question q reach rank g. */
  readonly eligible: readonly (readonly (readonly number[])[])[];
  /** Per view: itself and every view it requires, directly or not, as a bit mask. */
  readonly closure: readonly number[];
  /** Views that each question forces, closure included, as a bit mask. */
  readonly forcedBy: readonly number[];
  readonly times: readonly (readonly SparseTime[])[];
  /** `equivalents[k][v][c]`: certainty equivalent of a candidate's time at `rates[k]`, seconds. */
  readonly equivalents: readonly (readonly (readonly number[])[])[];
  /** The same at minus `sureRates[k]`. */
  readonly sureEquivalents: readonly (readonly (readonly number[])[])[];
  readonly sharedTimes: readonly SparseTime[];
  /** Bit mask of the views of each shared time. */
  readonly sharedViews: readonly number[];
  /** Quality times `qualityStep` minus nominal seconds: the last two goals as one whole number. */
  readonly values: readonly (readonly number[])[];
  readonly qualityStep: number;
  /** Earliest envelope of the candidates in a mask of a view; kept once computed. */
  readonly envelope: (view: number, mask: number) => SparseTime;
}

const mostBits = 30;

/** Rates per second at which times are made additive; the first stands for their least values. */
export const rates = [Infinity, 1 / 15, 1 / 60, 1 / 200, 1 / 600, 1 / 1800];

/** Rates per second at which a fit is sure, used with the opposite sign. */
export const sureRates = [1 / 30, 1 / 60, 1 / 120, 1 / 240, 1 / 480];

/** @throws ProblemError for more than 30 views, or 30 candidates of one view */
export function compiled(given: ChoiceProblem): Compiled {
  // A question that needs a view the problem does not have can never be answered; nor can one that needs none.
  const problem = {
    ...given,
    questions: given.questions.map((question) =>
      question.needs.every((v) => given.views[v] !== undefined)
        ? question
        : { ...question, needs: [] },
    ),
  };
  const { views, questions, shared } = problem;
  refuseMoreThan(mostBits, views.length, 'views of an exam');
  for (const view of views)
    refuseMoreThan(mostBits, view.candidates.length, `candidates of view ${view.id}`);
  const everything = views.map((view) => 2 ** view.candidates.length - 1);
  const eligible = views.map((view) =>
    questions.map((_, q) =>
      [0, 1, 2, 3].map((g) =>
        view.candidates.reduce(
          (mask, c, i) => ((c.ranks[q] ?? 0) >= g ? mask | (1 << i) : mask),
          0,
        ),
      ),
    ),
  );
  const closure = views.map((_, v) => {
    let mask = 0;
    for (let at: number | undefined = v; at !== undefined; at = views[at]?.requiresView) {
      if ((mask & (1 << at)) !== 0) break;
      mask |= 1 << at;
    }
    return mask;
  });
  const forcedBy = questions.map((question) =>
    question.needs.reduce((mask, v) => mask | (closure[v] ?? 0), 0),
  );
  const times = views.map((view) => view.candidates.map((c) => sparseTime(c.time)));
  const mostNominalS =
    shared.reduce((sum, s) => sum + s.nominalS, 0) +
    views.reduce((sum, view) => sum + Math.max(0, ...view.candidates.map((c) => c.nominalS)), 0);
  const qualityStep = Math.ceil(mostNominalS) + 1;
  const cache = new Map<number, SparseTime>();
  return {
    problem,
    everything,
    eligible,
    closure,
    forcedBy,
    times,
    equivalents: rates.map((rate) =>
      times.map((row) => row.map((time) => equivalentS(time, rate))),
    ),
    sureEquivalents: sureRates.map((rate) =>
      times.map((row) => row.map((time) => equivalentS(time, -rate))),
    ),
    sharedTimes: shared.map((s) => sparseTime(s.time)),
    sharedViews: shared.map((s) => s.views.reduce((mask, v) => mask | (1 << v), 0)),
    values: views.map((view) => view.candidates.map((c) => c.quality * qualityStep - c.nominalS)),
    qualityStep,
    envelope: (view, mask) => {
      const key = mask * 32 + view;
      const known = cache.get(key);
      if (known !== undefined) return known;
      const members = bitsOf(mask);
      const first = members[0];
      const made =
        members.length === 1 && first !== undefined
          ? times[view]![first]!
          : sparseTime(earliestEnvelope(members.map((c) => views[view]!.candidates[c]!.time)));
      cache.set(key, made);
      return made;
    },
  };
}

/** Positions of the set bits, lowest first. */
export function bitsOf(mask: number): number[] {
  const bits: number[] = [];
  for (let rest = mask, i = 0; rest !== 0; rest >>>= 1, i++) if ((rest & 1) !== 0) bits.push(i);
  return bits;
}

function refuseMoreThan(most: number, count: number, thing: string): void {
  if (count <= most) return;
  throw new ProblemError({
    code: 'choice-too-large',
    thing,
    value: `${count}`,
    limit: `at most ${most} can be searched exactly`,
    wayOut: 'Ask fewer questions at once, or trim the sequence library.',
  });
}
