import { catalogueRule } from '../exams/index.js';
import type { ScannerAbilities } from '../sequences/index.js';
import { rfExposure } from '../sequences/index.js';
import { cleanChance } from '../tolerance/index.js';
import { alternativesOf } from './alternatives.js';
import { cautionsOf } from './cautions.js';
import type { Candidate } from './cast.js';
import { choicesAlongCurve, curvePoints } from './curve.js';
import { meanS, quantileS } from './distribution.js';
import { chosenByView, explainAnswers, leftOutViews } from './explain.js';
import { liftFinder } from './lifts.js';
import { answersOwed } from './owed.js';
import type { Plan, PlanOutcome, PlanStep } from './plan.js';
import { prepare, type PlanningGround, type Prepared } from './prepare.js';
import type { ExamRequest } from './request.js';
import { runningOrder, type OrderedStep } from './running-order.js';
import type { ChoiceSolver } from './solver/linear.js';
import { compareObjectives, type Choice } from './solver/problem.js';
import { secondVisit } from './two-visits.js';

export interface PlanOptions {
  /** Picks the sequence set; its answer is held against the exact branch and bound. Without one that answers alone. */
  readonly solver?: ChoiceSolver;
  /** Scanners to look at for what would lift a low grade. */
  readonly otherScanners?: readonly ScannerAbilities[];
}

/** Plans one request on one scanner: sequences, order, grades with reasons, curve, alternatives, answers owed. */
export async function planExam(
  request: ExamRequest,
  scanner: ScannerAbilities,
  ground: PlanningGround,
  options: PlanOptions = {},
): Promise<PlanOutcome> {
  const ready = prepare(request, scanner, ground);
  if (ready.kind === 'refused') {
    return { kind: 'refused', requestId: request.id, problems: ready.problems };
  }
  const choices = new Map(choicesAlongCurve(ready.value));
  const choice = await agreedChoice(
    ready.value,
    choices.get(request.slotS) as Choice,
    options.solver,
  );
  choices.set(request.slotS, choice);
  return {
    kind: 'planned',
    plan: assemble(ready.value, choice, choices, ground, options.otherScanners ?? []),
  };
}

/** The solver's pick, held against the exact answer; where they differ the better one stands and the plan says so. */
async function agreedChoice(
  prepared: Prepared,
  exact: Choice,
  solver: ChoiceSolver | undefined,
): Promise<Choice> {
  if (solver === undefined) return exact;
  const picked = await solver.choose(prepared.problem);
  const difference = compareObjectives(picked.objective, exact.objective);
  if (difference < 0)
    return { ...exact, provedBy: `${exact.provedBy} (${solver.name} found less)` };
  if (difference > 0)
    return { ...picked, provedBy: `${picked.provedBy} (${exact.provedBy} found less)` };
  return { ...picked, provedBy: `${picked.provedBy}, agreed by ${exact.provedBy}` };
}

function assemble(
  prepared: Prepared,
  choice: Choice,
  choices: ReadonlyMap<number, Choice>,
  ground: PlanningGround,
  otherScanners: readonly ScannerAbilities[],
): Plan {
  const { request, scanner, exam, profile, cast, fixed } = prepared;
  const { policy } = ground.library;
  const chosen = [...chosenByView(prepared, choice).values()];
  const order = runningOrder({
    cast,
    chosen,
    stay: profile.stay,
    startS: fixed.localiserS,
    policy,
  });
  const visit = secondVisit(prepared, choice);
  const lifts = liftFinder(prepared, choice, choices, ground, otherScanners, visit?.ranks);
  const answers = explainAnswers(prepared, choice, choices, lifts);
  return {
    requestId: request.id,
    exam: { id: exam.id, name: exam.name },
    scanner: { id: scanner.id, name: scanner.name, fieldT: scanner.fieldT },
    slotS: request.slotS,
    chanceToFinish: choice.chance,
    wishedChance: policy.time.finishConfidence.value,
    tableTime: {
      meanS: meanS(choice.tableTime),
      tenthS: quantileS(choice.tableTime, 0.1),
      medianS: quantileS(choice.tableTime, 0.5),
      ninetiethS: quantileS(choice.tableTime, 0.9),
    },
    patient: { ...profile.says, restsOnPrior: profile.restsOnPrior },
    steps: [
      { kind: 'localiser', name: 'Localiser', startS: 0, endS: policy.time.localiserS.value },
      ...order.map((step) => planStep(step, prepared, ground)),
    ],
    answers,
    leftOut: leftOutViews(prepared, choice, choices),
    ruledOut: cast.ruledOut.map((r) => ({ view: r.view.name, sequence: r.sequenceId, why: r.why })),
    signedEntries: signedEntries(prepared, chosen, ground),
    cautions: cautionsOf(
      prepared,
      answers.every((a) => a.grade === 'diagnostic'),
    ),
    curve: curvePoints(prepared, choices),
    alternatives: alternativesOf(prepared, choices, visit),
    owed: answersOwed(answers, request, policy),
    provedBy: choice.provedBy,
  };
}

function planStep(step: OrderedStep, prepared: Prepared, ground: PlanningGround): PlanStep {
  const { candidate, startS, endS } = step;
  if (candidate === undefined)
    return { kind: 'injection', name: 'Contrast medium, given by the site', startS, endS };
  const { sequence, time, view } = candidate;
  const chance = cleanChance(sequence, time, prepared.profile, ground.library.policy, startS);
  return {
    kind: 'sequence',
    name: sequence.name,
    viewId: view.id,
    view: view.name,
    sequenceId: sequence.id,
    startS,
    endS,
    stillness: stillnessWords(candidate),
    cleanChance: chance.clean,
    b1RmsMicroTesla: rfExposure(sequence, time).b1RmsMicroTesla,
  };
}

/** What must be kept still or held, in words. */
export function stillnessWords({ time }: Candidate): string {
  const { kind, count, lengthS } = time.intervals;
  const length = lengthS < 10 ? Number(lengthS.toFixed(1)) : Math.round(lengthS);
  switch (kind) {
    case 'whole':
      return `still for ${length} s`;
    case 'hold':
      return count === 1
        ? `one breath-hold of ${length} s`
        : `${count} breath-holds of ${length} s`;
    case 'slice':
      return `${count} slices, each still for ${length} s`;
    case 'phase':
      return `${count} timed phases of ${length} s`;
    case 'repeat':
      return `${count} images, each still for ${length} s`;
  }
}

/** Signed entries that let a single-shot answer count for more than a look: every plan that leans on one prints it. */
function signedEntries(
  prepared: Prepared,
  chosen: readonly Candidate[],
  ground: PlanningGround,
): readonly string[] {
  const lines = new Set<string>();
  for (const candidate of chosen) {
    if (candidate.sequence.family !== 'single-shot') continue;
    for (const questionId of candidate.answers.keys()) {
      const { entry } = catalogueRule(
        ground.library.policy,
        prepared.exam.id,
        questionId,
        'single-shot',
      );
      if (entry === undefined || entry.atMost === 'screening' || entry.atMost === 'none') continue;
      lines.add(
        `${entry.question}: single-shot accepted as ${entry.atMost === 'targeted' ? 'targeted (this question only)' : entry.atMost}, signed by ${entry.signedBy} on ${entry.signedOn}: ${entry.because}`,
      );
    }
  }
  return [...lines];
}
