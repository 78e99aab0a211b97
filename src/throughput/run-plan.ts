import { factorsFor, lowestGrade, rankOf, type SitePolicy } from '../exams/index.js';
import {
  chooseCurve,
  chosenByView,
  judgeChoice,
  choiceProblem,
  prepare,
  runningOrder,
  type Candidate,
  type Choice,
  type Distribution,
  type ExamRequest,
  type PlanningGround,
  type Prepared,
} from '../planning/index.js';
import type { ScannerAbilities } from '../sequences/index.js';
import { cleanChance, type ToleranceStatement } from '../tolerance/index.js';
import { mostSteps, stayStepS, type RunPlan, type RunStep, type RunView } from './exam-run.js';

/** An exam to be simulated, with what its slot promises. */
export interface SlotPlan {
  readonly slotMin: number;
  /** Chance to end inside the slot, by the plan's own table time. */
  readonly chance: number;
  /** Sums of weights, as in the choice of one exam. */
  readonly diagnostic: number;
  readonly targeted: number;
  readonly screening: number;
  readonly tableTime: Distribution;
  readonly run: RunPlan;
}

/** Whether quick looks may stand in at the scanner where the full images failed or the time is over. */
export interface RunRules {
  readonly quickLooks: boolean;
}

/** What each slot length would be used for, for one request on one scanner, or why it cannot be taken there. */
export function slotPlans(
  request: ExamRequest,
  scanner: ScannerAbilities,
  ground: PlanningGround,
  slotsMin: readonly number[],
  rules: RunRules,
): readonly SlotPlan[] | { readonly cannot: string } {
  const ready = prepare(request, scanner, ground);
  if (ready.kind === 'refused') return { cannot: ready.problems[0]?.limit ?? 'cannot be planned' };
  const choices = chooseCurve(
    ready.value.problem,
    slotsMin.map((m) => m * 60),
  );
  // Neighbouring slots often run the same set: worked out once.
  const known = new Map<string, { readonly run: RunPlan; readonly choice: Choice }>();
  return choices.map((choice, n): SlotPlan => {
    const key = choice.picks.join(',');
    const same = known.get(key) ?? { run: runOf(ready.value, choice, ground, rules), choice };
    known.set(key, same);
    // The same set has the same table time: kept once, it is long.
    const { tableTime } = same.choice;
    return slotPlan(slotsMin[n]!, { ...choice, tableTime }, same.run);
  });
}

const slotPlan = (slotMin: number, choice: Choice, run: RunPlan): SlotPlan => ({
  slotMin,
  chance: choice.chance,
  diagnostic: choice.objective.diagnostic,
  targeted: choice.objective.targeted,
  screening: choice.objective.screening,
  tableTime: choice.tableTime,
  run,
});

function runOf(
  prepared: Prepared,
  choice: Choice,
  ground: PlanningGround,
  rules: RunRules,
): RunPlan {
  const chosen = [...chosenByView(prepared, choice).values()];
  return runPlan(prepared, chosen, ground, rules);
}

/** What a department without tolerance in mind plans everybody as: keeps still, holds the breath, stays. Common practice, no source. */
const untroubled: Pick<
  ToleranceStatement,
  'still' | 'hold' | 'stay' | 'followsInstructions' | 'conditions' | 'saidBy'
> = {
  still: { kind: 'stated', seconds: 3600 },
  hold: { kind: 'stated', seconds: 20 },
  stay: { kind: 'stated', seconds: 5400 },
  followsInstructions: 'yes',
  conditions: [],
  saidBy: 'earlier exam',
};

/**
 * The exam's full protocol whatever the patient can bear: the sequences an untroubled patient would get in a generous slot,
 * run on this patient with this patient's chances.
 */
export function fullProtocol(
  request: ExamRequest,
  scanner: ScannerAbilities,
  ground: PlanningGround,
  generousMin = 90,
): SlotPlan | { readonly cannot: string } {
  const asUntroubled: ExamRequest = {
    ...request,
    slotS: generousMin * 60,
    tolerance: { patientClass: request.tolerance.patientClass, ...untroubled },
  };
  const planned = prepare(asUntroubled, scanner, ground);
  if (planned.kind === 'refused')
    return { cannot: planned.problems[0]?.limit ?? 'cannot be planned' };
  const ready = prepare({ ...request, slotS: generousMin * 60 }, scanner, ground);
  if (ready.kind === 'refused') return { cannot: ready.problems[0]?.limit ?? 'cannot be planned' };
  const { policy } = ground.library;
  const [best] = chooseCurve(planned.value.problem, [generousMin * 60]);
  const { profile, fixed } = ready.value;
  const chosen = [...chosenByView(planned.value, best!).values()].map((c): Candidate => {
    const elapsedS = policy.movement.assumedElapsedS.value;
    return { ...c, clean: cleanChance(c.sequence, c.time, profile, policy, elapsedS) };
  });
  const cast = {
    ...planned.value.cast,
    views: planned.value.cast.views.map(({ view }) => ({
      view,
      candidates: chosen.filter((c) => c.view.id === view.id),
    })),
  };
  const own = { ...ready.value, cast };
  const problem = choiceProblem({ cast, fixed, profile, policy, slotS: generousMin * 60 });
  const { choice } = judgeChoice(
    problem,
    cast.views.map(({ candidates }) => (candidates.length > 0 ? 0 : -1)),
  );
  return slotPlan(generousMin, choice, runPlan(own, chosen, ground, { quickLooks: false }));
}

function runPlan(
  prepared: Prepared,
  chosen: readonly Candidate[],
  ground: PlanningGround,
  rules: RunRules,
): RunPlan {
  const { policy } = ground.library;
  const { cast, profile, fixed, questions } = prepared;
  const numberOf = new Map(cast.views.map(({ view }, n) => [view.id, n]));
  const order = runningOrder({
    cast,
    chosen,
    stay: profile.stay,
    startS: fixed.localiserS,
    policy,
  });
  const views = order.map(({ candidate, startS }): RunView => {
    if (candidate === undefined) return { step: injection(policy) };
    const number = numberOf.get(candidate.view.id) ?? -1;
    const step = runStep(prepared, candidate, number, startS, ground);
    const quick = rules.quickLooks ? quickFor(prepared, candidate) : undefined;
    return quick === undefined
      ? { step }
      : { step, quick: runStep(prepared, quick, number, startS, ground) };
  });
  if (views.length > mostSteps) throw new Error(`an exam of ${views.length} steps`);
  return {
    entryMeanS: fixed.entryMeanS,
    entryCv: policy.time.entry.value.cv,
    localiserS: fixed.localiserS,
    exitMeanS: fixed.exitMeanS,
    exitCv: policy.time.exit.value.cv,
    order: views,
    needs: questions.map((q) => q.needs.map((need) => numberOf.get(need.view) ?? 31)),
    stay: Float64Array.from({ length: 2 + (3 * 3600) / stayStepS }, (_, n) =>
      // Bearing the scanner counts from entry, and entry is part of the table time.
      profile.stay(Math.max(0, n * stayStepS - fixed.entryMeanS)),
    ),
  };
}

function injection(policy: SitePolicy): RunStep {
  const { meanS, cv } = policy.time.injection.value;
  return {
    ...{ view: -1, acquisitionS: meanS, idleS: 0, variation: cv, retakes: 'nothing' },
    ...{ pieces: 1, pieceS: 0, spoiledPiece: 0, clean: 1, ranks: [] },
  };
}

/** The quickest image of the same view that answers something: a single-shot one, other than the planned. */
function quickFor({ cast }: Prepared, planned: Candidate): Candidate | undefined {
  const candidates = cast.views.find(({ view }) => view.id === planned.view.id)?.candidates ?? [];
  const worth = (c: Candidate) =>
    [...c.answers.values()].reduce((sum, answer) => sum + rankOf(answer.grade), 0);
  return candidates
    .filter((c) => c.sequence.family === 'single-shot' && c.sequence.id !== planned.sequence.id)
    .filter((c) => c.time.acquisitionS < planned.time.acquisitionS)
    .sort((a, b) => worth(b) - worth(a) || a.time.acquisitionS - b.time.acquisitionS)[0];
}

/** @param elapsedS seconds in the scanner when it starts, if all goes well */
function runStep(
  prepared: Prepared,
  { view, sequence, time }: Candidate,
  number: number,
  elapsedS: number,
  ground: PlanningGround,
): RunStep {
  const { policy } = ground.library;
  const { exam, questions, profile } = prepared;
  const chance = cleanChance(sequence, time, profile, policy, elapsedS);
  const held = time.intervals.kind === 'hold';
  return {
    view: number,
    acquisitionS: time.acquisitionS,
    idleS: policy.time.idleBetweenS.value,
    variation: sequence.breathing === 'triggered' ? policy.time.triggeredCv.value : 0,
    retakes: chance.retakes,
    pieces: time.intervals.count,
    pieceS: time.intervals.lengthS + (held ? policy.breathing.value.recoveryGapS : 0),
    spoiledPiece: chance.spoiledPiece,
    clean: chance.clean,
    // What came out clean is graded without the chance of movement.
    ranks: questions.map((question) => {
      const need = question.needs.find((n) => n.view === view.id);
      if (need === undefined) return -1;
      const evidence = ground.evidence.of(view, sequence, need.target);
      const factors = factorsFor({
        policy,
        exam,
        question,
        view,
        sequence,
        evidence,
      });
      return rankOf(lowestGrade(factors).grade);
    }),
  };
}
