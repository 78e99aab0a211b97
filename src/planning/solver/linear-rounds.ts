import { bitsOf, type Compiled } from './compiled.js';
import { coverCut } from './cover-cut.js';
import { fitFor, type Fit } from './fit.js';
import { linearModel, scaledRow, type LinearModel } from './linear-model.js';
import type { Programme, ProgrammeThread } from './linear-worker.js';
import { judgeChoice, type Judgement } from './problem.js';

export type LinearOutcome =
  | { readonly kind: 'chosen'; readonly picks: readonly number[]; readonly rounds: number }
  | { readonly kind: 'given-up'; readonly why: string };

const mostRounds = 60;
/** Rounding allowed on whole numbers, rows and goals, relative to 1. */
const slack = 1e-6;

/** Carries the reason why the linear programme's answer cannot be used. */
class Amiss extends Error {}

/**
 * First the grades, then quality and time with the grades kept. Each answer that misses the chance
 * constraint is cut off and the programme solved again, so what remains is the exact optimum.
 */
export async function linearChoice(
  model: Compiled,
  thread: ProgrammeThread,
  wallClockMs: number,
): Promise<LinearOutcome> {
  const { problem } = model;
  const slotS = Math.max(0, Math.floor(problem.slotS));
  const fit = fitFor(model, slotS);
  const nothing = problem.views.map(() => -1);
  if (!fit.base || problem.baseNominalS > problem.stayLimitS) {
    return { kind: 'chosen', picks: nothing, rounds: 0 };
  }
  const linear = linearModel(model, slotS);
  const endMs = performance.now() + wallClockMs;
  let rounds = 0;

  /** Solves until the picks keep the chance constraint, cutting off those that do not. */
  const settle = async (
    goal: readonly number[],
    worth: (judged: Judgement) => number,
    quicker: boolean,
  ): Promise<Judgement> => {
    for (;;) {
      if (++rounds > mostRounds) throw new Amiss(`no answer after ${mostRounds} rounds`);
      const programme = linear.programme(goal);
      const values = await solved(thread, programme, endMs - performance.now());
      const picks = picksFrom(model, linear, values);
      const judged = judgeChoice(problem, picks);
      const claimed = goal.reduce((sum, value, j) => sum + value * values[j]!, 0);
      const gap = Math.abs(claimed - worth(judged));
      if (gap > slack * Math.max(1, Math.abs(claimed))) {
        throw new Amiss(`it claims ${claimed} where its picks give ${worth(judged)}`);
      }
      if (judged.feasible) return judged;
      const quick = quicker ? quickest(model, fit, picks, judged) : undefined;
      if (quick?.feasible === true) return quick;
      addCut(model, fit, linear, picks);
    }
  };

  try {
    const graded = await settle(
      linear.gradeGoal,
      (j) => linear.gradeWorth(j.choice.objective),
      true,
    );
    linear.keepGrades(graded.choice.objective);
    const best = await settle(
      linear.qualityGoal,
      ({ choice: { objective } }) => objective.quality - objective.nominalS / model.qualityStep,
      false,
    );
    return { kind: 'chosen', picks: best.choice.picks, rounds };
  } catch (error) {
    if (error instanceof Amiss) return { kind: 'given-up', why: error.message };
    throw error;
  }
}

async function solved(
  thread: ProgrammeThread,
  programme: Programme,
  leftMs: number,
): Promise<Float64Array> {
  if (leftMs <= 0) throw new Amiss('its time ran out');
  const answer = await thread.solve(programme, leftMs);
  if (answer.kind === 'out-of-time') throw new Amiss('its time ran out');
  if (answer.kind === 'failed') throw new Amiss(answer.why);
  // Choosing nothing always satisfies the rows, so "infeasible" can only be an error.
  if (!answer.feasible) throw new Amiss('it says that even choosing nothing is impossible');
  const { values } = answer;
  for (let j = 0; j < programme.columns; j++) {
    const value = values[j] ?? NaN;
    const whole = j >= programme.wholes || Math.abs(value - Math.round(value)) <= slack;
    if (!(value >= -slack && whole)) throw new Amiss(`column ${j} came out as ${value}`);
  }
  for (const row of programme.rows) {
    const sum = row.at.reduce((total, j, k) => total + row.values[k]! * values[j]!, 0);
    if (sum > row.most + slack) throw new Amiss(`a row of ${row.most} came out as ${sum}`);
  }
  return values;
}

function picksFrom(model: Compiled, linear: LinearModel, values: Float64Array): number[] {
  return model.times.map((times, v) => times.findIndex((_, c) => values[linear.pick(v, c)]! > 0.5));
}

/** The quickest picks that keep every grade of these picks, if they fit. */
function quickest(
  model: Compiled,
  fit: Fit,
  picks: readonly number[],
  judged: Judgement,
): Judgement | undefined {
  const masks = Int32Array.from(model.everything);
  let chosen = 0;
  picks.forEach((pick, v) => {
    if (pick !== -1) chosen |= 1 << v;
  });
  model.problem.questions.forEach(({ needs }, q) => {
    for (const v of needs) masks[v]! &= model.eligible[v]![q]![judged.choice.ranks[q]!]!;
  });
  if (!(fit.may(chosen, masks) && fit.earliest(chosen, masks))) return undefined;
  const byTime = model.equivalents[equivalentUsed]!;
  const quick = picks.map((pick, v) =>
    pick === -1
      ? -1
      : bitsOf(masks[v]!).reduce((a, b) => (byTime[v]![b]! < byTime[v]![a]! ? b : a)),
  );
  return judgeChoice(model.problem, quick);
}

/** Position in `rates`: sequences are compared by something near their mean, with some weight on spread. */
const equivalentUsed = 4;

function addCut(model: Compiled, fit: Fit, linear: LinearModel, picks: readonly number[]): void {
  const masks = Int32Array.from(picks, (pick) => (pick === -1 ? 0 : 1 << pick));
  const views = picks.reduce((mask, pick, v) => (pick === -1 ? mask : mask | (1 << v)), 0);
  const cut = coverCut(model, fit, views, masks);
  if (cut === undefined) throw new Amiss('its picks break a row that no cut explains');
  const members = bitsOf(cut.views);
  linear.rows.push(
    scaledRow(
      members.length - 1,
      members.flatMap((v) =>
        bitsOf(cut.candidates[v]!).map((c) => [linear.pick(v, c), 1] as const),
      ),
    ),
  );
}
