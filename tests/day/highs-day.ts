import type { FillProblem } from '../../src/day/index.js';
import { loadHighsOnce } from '../oracles/highs-choice.js';

/**
 * Second opinion on a filled department: HiGHS on the time-indexed model, written from the rules alone (own five-minute
 * grid, own windows, own weights). One path of arcs through each scanner's day, an arc per visit length, and requests that
 * must be matched by arcs of their length, before and after noon. Whole: stage by stage over answers and overruns;
 * relaxed: the linear bound of one tier. Coils and waiting are not in it; teams neither.
 */
export interface DayByHighs {
  readonly diagnostic: number;
  readonly targeted: number;
  readonly screening: number;
  readonly overrunPercent: number;
}

const worthOf = { routine: 1, urgent: 2, asap: 4, stat: 8 };
const noon = 144;

interface Column {
  readonly gain: DayByHighs;
}

export async function highsDay(
  problem: FillProblem,
  how: 'whole' | 'relaxed',
): Promise<DayByHighs | number> {
  const highs = await loadHighsOnce();
  const columns: Column[] = [];
  const none = { diagnostic: 0, targeted: 0, screening: 0, overrunPercent: 0 };
  const add = (gain: DayByHighs = none): number => columns.push({ gain }) - 1;
  const rows: { low: number; high: number; entries: [number, number][] }[] = [];
  const once = problem.waiting.map(() => [] as [number, number][]);

  for (const date of problem.department.days)
    for (const scanner of problem.department.scanners) {
      const free = Array.from(
        { length: 288 },
        (_, t) =>
          scanner.hours.some((h) => 5 * t >= h.fromMin && 5 * t + 5 <= h.toMin) &&
          ![
            ...scanner.breaks,
            ...problem.taken
              .filter((b) => b.scannerId === scanner.id && b.date === date)
              .map((b) => ({ fromMin: b.startMin, toMin: b.startMin + b.slotMin })),
          ].some((b) => 5 * t < b.toMin && b.fromMin < 5 * t + 5),
      );
      // Per length: who asks for it, by part of the day.
      const asks = new Map<number, { any: number[]; morning: number[]; afternoon: number[] }>();
      problem.waiting.forEach((r, n) => {
        const { from, until, partOfDay } = r.canCome;
        if ((from !== undefined && date < from) || (until !== undefined && date > until)) return;
        const late = r.dueDate !== undefined && date > r.dueDate;
        if (late && (r.priority === 'stat' || r.priority === 'asap')) return;
        const factor = worthOf[r.priority] * (late ? 1 : 2);
        for (const o of r.offers.get(scanner.id) ?? []) {
          const column = add({
            diagnostic: factor * o.diagnostic,
            targeted: factor * o.targeted,
            screening: factor * o.screening,
            overrunPercent: -Math.round(100 * (1 - o.chance)),
          });
          once[n]!.push([column, 1]);
          const length = o.slotMin / 5;
          if (!asks.has(length)) asks.set(length, { any: [], morning: [], afternoon: [] });
          asks.get(length)![partOfDay].push(column);
        }
      });
      const first = free.indexOf(true);
      const last = free.lastIndexOf(true);
      if (first < 0) continue;
      const into = Array.from({ length: 289 }, () => [] as number[]);
      const outOf = Array.from({ length: 289 }, () => [] as number[]);
      const arc = (t: number, n: number): number => {
        const column = add();
        outOf[t]!.push(column);
        into[t + n]!.push(column);
        return column;
      };
      for (let t = first; t <= last; t++) arc(t, 1);
      for (const [length, who] of asks) {
        const early: number[] = [];
        const late: number[] = [];
        for (let t = first; t + length <= last + 1; t++)
          if (free.slice(t, t + length).every(Boolean))
            (t < noon ? early : late).push(arc(t, length));
        const row = (high: readonly number[], low: readonly number[], equal: boolean) =>
          rows.push({
            low: equal ? 0 : -highs.infinity,
            high: 0,
            entries: [
              ...high.map((c): [number, number] => [c, 1]),
              ...low.map((c): [number, number] => [c, -1]),
            ],
          });
        row([...who.any, ...who.morning, ...who.afternoon], [...early, ...late], true);
        if (who.morning.length > 0) row(who.morning, early, false);
        if (who.afternoon.length > 0) row(who.afternoon, late, false);
      }
      for (let t = first; t <= last; t++) {
        const balance = t === first ? 1 : 0;
        rows.push({
          low: balance,
          high: balance,
          entries: [
            ...outOf[t]!.map((c): [number, number] => [c, 1]),
            ...into[t]!.map((c): [number, number] => [c, -1]),
          ],
        });
      }
    }
  for (const entries of once) rows.push({ low: -highs.infinity, high: 1, entries });

  const solve = (tier: keyof DayByHighs): number => {
    const starts = [0];
    const indices: number[] = [];
    const values: number[] = [];
    for (const { entries } of rows) {
      for (const [c, v] of entries) {
        indices.push(c);
        values.push(v);
      }
      starts.push(indices.length);
    }
    const count = columns.length;
    const model = highs.createModel({
      numCols: count,
      numRows: rows.length,
      sense: highs.constants.objectiveSense.maximize,
      colCost: Float64Array.from(columns, (c) => c.gain[tier]),
      colLower: new Float64Array(count),
      colUpper: new Float64Array(count).fill(1),
      rowLower: rows.map((r) => r.low),
      rowUpper: rows.map((r) => r.high),
      ...(how === 'whole' ? { integrality: new Int32Array(count).fill(1) } : {}),
      matrix: { format: 'csr', numRows: rows.length, numCols: count, starts, indices, values },
    });
    try {
      model.options.set({ output_flag: false, mip_rel_gap: 0, mip_abs_gap: 1e-6 });
      model.run();
      if (model.getModelStatus() !== highs.constants.modelStatus.optimal)
        throw new Error(`HiGHS status ${model.getModelStatus()}`);
      return model.getObjectiveValue();
    } finally {
      model.dispose();
    }
  };
  if (how === 'relaxed') return solve('diagnostic');
  const reached = { ...none };
  for (const tier of ['diagnostic', 'targeted', 'screening', 'overrunPercent'] as const) {
    reached[tier] = Math.round(solve(tier));
    rows.push({
      low: reached[tier] - 0.5,
      high: highs.infinity,
      entries: columns.flatMap((c, n): [number, number][] =>
        c.gain[tier] === 0 ? [] : [[n, c.gain[tier]]],
      ),
    });
  }
  return { ...reached, overrunPercent: -reached.overrunPercent };
}
