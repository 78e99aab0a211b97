import loadHighs, { type Highs } from 'highs';
import {
  chanceWithin,
  convolve,
  quantileS,
  type Distribution,
} from '../../src/planning/distribution.js';
import { judgeChoice, type Choice, type ChoiceProblem } from '../../src/planning/solver/problem.js';

/**
 * Second opinion on an exam choice: the published mixed-integer solver HiGHS, one goal after the other, every goal
 * reached kept as a row. The chance constraint is met by leaving out sets of picks that miss it (with everything
 * stochastically later), one at a time, until the answer keeps it. Shares with the solvers under
 * test only the convolution, which has its own tests.
 */
export type HighsRuntime = Highs;
// Its types describe a CommonJS module, the package serves an ES module: the default is the loader itself.
const load = loadHighs as unknown as () => Promise<HighsRuntime>;
let loading: Promise<HighsRuntime> | undefined;
export function loadHighsOnce(): Promise<HighsRuntime> {
  return (loading ??= load());
}

interface Row {
  readonly low: number;
  readonly high: number;
  readonly entries: ReadonlyMap<number, number>;
}

export function highsChoice(highs: HighsRuntime, problem: ChoiceProblem): Choice {
  const { views, questions, shared } = problem;
  const nothing = judgeChoice(
    problem,
    views.map(() => -1),
  ).choice;
  if (chanceWithin(problem.base, problem.slotS) < problem.confidence - 1e-9) return nothing;

  let columns = 0;
  const x = views.map((view) => view.candidates.map(() => columns++));
  const y = questions.map(() => [1, 2, 3].map(() => columns++));
  const z = shared.map(() => columns++);
  const rows: Row[] = [];
  const atMost = (high: number, entries: readonly (readonly [number, number])[]): void => {
    const sum = new Map<number, number>();
    for (const [column, value] of entries) sum.set(column, (sum.get(column) ?? 0) + value);
    rows.push({ low: -highs.infinity, high, entries: sum });
  };
  const all = (v: number, factor: number) => x[v]!.map((column) => [column, factor] as const);

  views.forEach((view, v) => {
    atMost(1, all(v, 1));
    if (view.requiresView !== undefined) atMost(0, [...all(v, 1), ...all(view.requiresView, -1)]);
    const users = views.flatMap((other, u) => (other.requiresView === v ? [u] : []));
    const askers = questions.flatMap((question, q) => (question.needs.includes(v) ? [q] : []));
    atMost(0, [
      ...all(v, 1),
      ...users.flatMap((u) => all(u, -1)),
      ...askers.map((q) => [y[q]![0]!, -1] as const),
    ]);
    shared.forEach((s, k) => {
      if (s.views.includes(v)) atMost(0, [...all(v, 1), [z[k]!, -1]]);
    });
  });
  questions.forEach((question, q) => {
    for (let g = 1; g <= 3; g++) {
      if (question.needs.length === 0) atMost(0, [[y[q]![g - 1]!, 1]]);
      for (const v of question.needs) {
        const able = views[v]!.candidates.flatMap((c, i) =>
          (c.ranks[q] ?? 0) >= g ? [[x[v]![i]!, -1] as const] : [],
        );
        atMost(0, [[y[q]![g - 1]!, 1], ...able]);
      }
    }
  });
  const sumOf = (candidate: (v: number, c: number) => number, once: (k: number) => number) => [
    ...views.flatMap((view, v) =>
      view.candidates.map((_, c) => [x[v]![c]!, candidate(v, c)] as const),
    ),
    ...shared.map((_, k) => [z[k]!, once(k)] as const),
  ];
  atMost(
    problem.slotS - quantileS(problem.base, problem.confidence),
    sumOf(
      (v, c) => views[v]!.candidates[c]!.time.startS,
      (k) => shared[k]!.time.startS,
    ),
  );
  const nominal = sumOf(
    (v, c) => views[v]!.candidates[c]!.nominalS,
    (k) => shared[k]!.nominalS,
  );
  // Where the limit is below the base, nothing may be chosen.
  atMost(Math.max(0, problem.stayLimitS - problem.baseNominalS), nominal);
  if (problem.stayLimitS < problem.baseNominalS)
    atMost(
      0,
      sumOf(
        () => 1,
        () => 0,
      ),
    );

  const gradeGoal = (least: number) =>
    questions.map(({ weight }, q) => [y[q]![least - 1]!, weight] as const);
  const goals = [
    gradeGoal(3),
    gradeGoal(2),
    gradeGoal(1),
    sumOf(
      (v, c) => views[v]!.candidates[c]!.quality,
      () => 0,
    ),
    nominal.map(([column, value]) => [column, -value] as const),
  ];

  let picks = views.map(() => -1);
  for (const goal of goals) {
    for (;;) {
      const { values, objective } = solve(highs, columns, rows, new Map(goal));
      picks = x.map((row) => row.findIndex((column) => values[column]! > 0.5));
      const late = tooLate(problem, picks);
      if (late === undefined) {
        rows.push({
          low: Math.round(objective) - 0.5,
          high: highs.infinity,
          entries: new Map(goal),
        });
        break;
      }
      atMost(
        late.length - 1,
        late.flatMap((v) =>
          views[v]!.candidates.flatMap((c, i) =>
            noLater(views[v]!.candidates[picks[v]!]!.time, c.time) ? [[x[v]![i]!, 1] as const] : [],
          ),
        ),
      );
    }
  }
  const { feasible, broken, choice } = judgeChoice(problem, picks);
  if (!feasible) throw new Error(`the oracle's picks break rows: ${broken.join('; ')}`);
  return { ...choice, provedBy: 'HiGHS' };
}

function solve(
  highs: HighsRuntime,
  columns: number,
  rows: readonly Row[],
  goal: ReadonlyMap<number, number>,
): { values: Float64Array; objective: number } {
  const starts = [0];
  const indices: number[] = [];
  const values: number[] = [];
  for (const { entries } of rows) {
    for (const [column, value] of entries) {
      if (value === 0) continue;
      indices.push(column);
      values.push(value);
    }
    starts.push(indices.length);
  }
  const model = highs.createModel({
    numCols: columns,
    numRows: rows.length,
    sense: highs.constants.objectiveSense.maximize,
    colCost: Float64Array.from({ length: columns }, (_, j) => goal.get(j) ?? 0),
    colLower: new Float64Array(columns),
    colUpper: new Float64Array(columns).fill(1),
    rowLower: rows.map((row) => row.low),
    rowUpper: rows.map((row) => row.high),
    integrality: new Int32Array(columns).fill(1),
    matrix: { format: 'csr', numRows: rows.length, numCols: columns, starts, indices, values },
  });
  try {
    model.options.set({ output_flag: false, mip_rel_gap: 0, mip_abs_gap: 1e-6 });
    model.run();
    const status = model.getModelStatus();
    if (status !== highs.constants.modelStatus.optimal) throw new Error(`HiGHS status ${status}`);
    return { values: model.getSolution().colValue, objective: model.getObjectiveValue() };
  } finally {
    model.dispose();
  }
}

/** A smallest-by-removal set of picked views that misses the slot, or undefined when all picks fit. */
function tooLate(problem: ChoiceProblem, picks: readonly number[]): number[] | undefined {
  const misses = (views: readonly number[]): boolean => {
    let time: Distribution = problem.base;
    for (const s of problem.shared) {
      if (s.views.some((v) => views.includes(v))) time = convolve(time, s.time);
    }
    for (const v of views) time = convolve(time, problem.views[v]!.candidates[picks[v]!]!.time);
    return chanceWithin(time, problem.slotS) < problem.confidence - 1e-9;
  };
  let late = picks.flatMap((pick, v) => (pick === -1 ? [] : [v]));
  if (!misses(late)) return undefined;
  for (const v of [...late]) {
    const fewer = late.filter((other) => other !== v);
    if (misses(fewer)) late = fewer;
  }
  return late;
}

/** P(a <= s) >= P(b <= s) at every second. */
function noLater(a: Distribution, b: Distribution): boolean {
  const endS = Math.max(a.startS + a.p.length, b.startS + b.p.length);
  for (let s = Math.min(a.startS, b.startS); s < endS; s += 1) {
    if (chanceWithin(a, s) < chanceWithin(b, s) - 1e-12) return false;
  }
  return true;
}
