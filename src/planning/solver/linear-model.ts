import { bitsOf, rates, type Compiled } from './compiled.js';
import { chanceTolerance } from './judge.js';
import type { Programme, ProgrammeRow } from './linear-worker.js';
import type { ChoiceObjective } from './problem.js';
import { cumulative, equivalentS, roomS } from './spent-time.js';

/** A choice problem as a linear programme with whole numbers. */
export interface LinearModel {
  readonly rows: ProgrammeRow[];
  /** Grades, three levels as one whole number by a base above every sum of weights. */
  readonly gradeGoal: readonly number[];
  /** Quality, less a fraction of it for time. */
  readonly qualityGoal: readonly number[];
  readonly programme: (goal: readonly number[]) => Programme;
  /** Column of a candidate. */
  readonly pick: (view: number, candidate: number) => number;
  readonly gradeWorth: (objective: ChoiceObjective) => number;
  /** Adds rows: at least these sums of weights at each level. */
  readonly keepGrades: (objective: ChoiceObjective) => void;
}

/** Positions in `rates` of the additive time rows: least values, and two of the exponential bounds. */
const timeRows = [0, 2, 4];

/**
 * Columns: one per view and candidate (whole), one per question and grade, one per shared time. The time rows
 * are necessary conditions of the chance constraint; what they let through is cut off later.
 */
export function linearModel(model: Compiled, slotS: number): LinearModel {
  const { problem } = model;
  const { views, questions, shared } = problem;
  let columns = 0;
  const x = views.map((view) => view.candidates.map(() => columns++));
  const wholes = columns;
  const y = questions.map(() => [1, 2, 3].map(() => columns++));
  const z = shared.map(() => columns++);
  const rows: ProgrammeRow[] = [];
  const atMost = (most: number, entries: readonly (readonly [number, number])[]): void => {
    rows.push(scaledRow(most, entries));
  };
  const all = (v: number, factor: number) => x[v]!.map((column) => [column, factor] as const);

  views.forEach((view, v) => {
    if (view.candidates.length === 0) return;
    atMost(1, all(v, 1));
    if (view.requiresView !== undefined) atMost(0, [...all(v, 1), ...all(view.requiresView, -1)]);
    // Run only what serves an answer, directly or as a required twin.
    const users = views.flatMap((other, u) =>
      other.requiresView === v && u !== v ? all(u, -1) : [],
    );
    const askers = questions.flatMap((question, q) =>
      question.needs.includes(v) ? [[y[q]![0]!, -1] as const] : [],
    );
    atMost(0, [...all(v, 1), ...users, ...askers]);
  });
  shared.forEach((s, k) => {
    for (const v of s.views) if (x[v]!.length > 0) atMost(0, [...all(v, 1), [z[k]!, -1]]);
  });
  questions.forEach(({ needs }, q) => {
    for (let g = 1; g <= 3; g++) {
      const grade = y[q]![g - 1]!;
      if (needs.length === 0) atMost(0, [[grade, 1]]);
      for (const v of new Set(needs)) {
        const able = bitsOf(model.eligible[v]![q]![g]!).map((c) => [x[v]![c]!, -1] as const);
        atMost(0, [[grade, 1], ...able]);
      }
    }
  });

  const sumOf = (candidate: (v: number, c: number) => number, once: (s: number) => number) => [
    ...views.flatMap((view, v) =>
      view.candidates.map((_, c) => [x[v]![c]!, candidate(v, c)] as const),
    ),
    ...shared.map((_, s) => [z[s]!, once(s)] as const),
  ];
  const base = cumulative(problem.base, slotS);
  const wanted = problem.confidence - 2 * chanceTolerance;
  for (const k of timeRows) {
    const room = roomS(base, problem.base.startS, wanted, rates[k]!, { leastS: 0, mostS: slotS });
    atMost(
      room + 1e-6,
      sumOf(
        (v, c) => model.equivalents[k]![v]![c]!,
        (s) => equivalentS(model.sharedTimes[s]!, rates[k]!),
      ),
    );
  }
  const nominal = sumOf(
    (v, c) => views[v]!.candidates[c]!.nominalS,
    (s) => shared[s]!.nominalS,
  );
  atMost(problem.stayLimitS - problem.baseNominalS, nominal);

  const base1 = 1 + questions.reduce((sum, { weight }) => sum + weight, 0);
  const gradeGoal = new Array<number>(columns).fill(0);
  questions.forEach(({ weight }, q) => {
    y[q]!.forEach((column, i) => (gradeGoal[column] = weight * base1 ** i));
  });
  const qualityGoal = new Array<number>(columns).fill(0);
  for (const [column, seconds] of nominal) qualityGoal[column] = -seconds / model.qualityStep;
  views.forEach((view, v) =>
    view.candidates.forEach((c, i) => (qualityGoal[x[v]![i]!]! += c.quality)),
  );
  return {
    rows,
    gradeGoal,
    qualityGoal,
    programme: (goal) => ({ columns, wholes, goal, rows }),
    pick: (view, candidate) => x[view]![candidate]!,
    keepGrades: ({ screening, targeted, diagnostic }) => {
      [screening, targeted, diagnostic].forEach((sum, i) => {
        if (sum === 0) return;
        atMost(
          1e-6 - sum,
          questions.map(({ weight }, q) => [y[q]![i]!, -weight] as const),
        );
      });
    },
    gradeWorth: (o) => (o.diagnostic * base1 + o.targeted) * base1 + o.screening,
  };
}

/** A row whose largest coefficient is 1 in size. */
export function scaledRow(
  most: number,
  entries: readonly (readonly [number, number])[],
): ProgrammeRow {
  const sums = new Map<number, number>();
  for (const [column, value] of entries) sums.set(column, (sums.get(column) ?? 0) + value);
  const used = [...sums].filter(([, value]) => value !== 0);
  const scale = used.reduce((largest, [, value]) => Math.max(largest, Math.abs(value)), 0) || 1;
  return {
    most: most / scale,
    at: used.map(([column]) => column),
    values: used.map(([, value]) => value / scale),
  };
}
