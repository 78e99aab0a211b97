import type { Scanner } from '../day/index.js';
import { quantileS, type ExamRequest, type PlanningGround } from '../planning/index.js';
import { countedKinds, kindsOf, type KindsUsed, type RequestKind } from './kinds.js';
import type { PlanBook } from './plan-book.js';
import type { SlotPlan } from './run-plan.js';
import type { Scenario } from './scenario.js';
import type { SimDepartment, SimKind, SimPlace, SimScanner } from './sim-department.js';

export interface WorkedOut {
  readonly department: SimDepartment;
  /** Requests on record that no scanner of the scenario can take, by exam and coil: they come, are counted and not listed. */
  readonly leftOut: readonly string[];
  /** Kinds of request that were planned, and how many stand on record. */
  readonly kinds: KindsUsed;
}

/** Works a scenario out into numbers, kind by kind; planning takes a while, so the caller may breathe between steps. */
export function* workOut(
  scenario: Scenario,
  requests: readonly ExamRequest[],
  ground: PlanningGround,
  book: PlanBook,
): Generator<{ readonly done: number; readonly of: number }, WorkedOut> {
  const { policy, exams } = ground.library;
  const { slots, content, quickLooks, teams, cutShortAfterMin, ...numbers } = scenario;
  const kinds = kindsOf(requests, scenario);
  const coils = [...new Set(kinds.map((k) => exams.get(k.request.examId)?.coil ?? ''))];
  const worked: SimKind[] = [];
  const leftOut = new Set<string>();
  for (const [n, kind] of kinds.entries()) {
    yield { done: n, of: kinds.length };
    const { request, group, weight } = kind;
    const exam = exams.get(request.examId);
    const places = scenario.scanners.map((scanner) => placeOn(kind, scanner));
    if (places.every((p) => p === undefined)) {
      leftOut.add(`${exam?.name ?? request.examId} (coil: ${exam?.coil ?? 'unknown'})`);
    }
    worked.push({
      weight,
      emergency: group === 'emergency',
      urgent: request.priority !== 'routine',
      coil: coils.indexOf(exam?.coil ?? ''),
      team: teams.findIndex((t) => t.groups.includes(group)),
      contrast: request.contrast === 'approved' || request.contrast === 'undecided',
      questions:
        request.questionIds.length > 0 ? request.questionIds.length : (exam?.questions.length ?? 0),
      places,
    });
  }
  const coilChange = policy.time.coilChange.value;
  const department: SimDepartment = {
    ...numbers,
    scanners: scenario.scanners.map(simScanner),
    kinds: worked,
    teams: teams.map((t) => t.count),
    cutShortAfterMin: cutShortAfterMin ?? Infinity,
    coilChangeMeanMin: coilChange.meanS / 60,
    coilChangeCv: coilChange.cv,
  };
  const onRecord = countedKinds(requests).length;
  return { department, leftOut: [...leftOut], kinds: { planned: kinds.length, onRecord } };

  function placeOn({ request }: RequestKind, scanner: Scanner): SimPlace | undefined {
    if (content === 'planned') {
      const plans = book.plansFor(request, scanner, quickLooks);
      const chosen = plans === undefined ? undefined : planFor(plans, request.examId);
      if (chosen !== undefined) return { slotMin: chosen.slotMin, run: chosen.run };
    }
    // Where planning finds no answer and nothing quick is allowed, a department tries the full protocol all the same.
    const full = book.fullFor(request, scanner);
    if (full === undefined || full.screening === 0) return undefined;
    const steps = Math.ceil(quantileS(full.tableTime, policy.time.finishConfidence.value) / 300);
    const slotMin = slots.kind === 'tolerance' ? Math.max(10, 5 * steps) : asked(request.examId);
    return { slotMin, run: full.run };
  }

  function planFor(plans: readonly SlotPlan[], examId: string): SlotPlan | undefined {
    if (slots.kind === 'tolerance') return shortestBest(plans, slots.mostMin);
    const minutes = asked(examId);
    for (let many = 1; many <= 3; many++) {
      const plan = plans.find((p) => p.slotMin === many * minutes);
      if (plan !== undefined && plan.screening > 0) return plan;
    }
    return undefined;
  }

  function asked(examId: string): number {
    if (slots.kind === 'fixed') return slots.minutes;
    if (slots.kind === 'by exam') return slots.minutes[examId] ?? slots.otherwise;
    return slots.mostMin;
  }
}

/** The shortest slot with the best answers there are up to the longest one allowed; undefined where nothing is answered. */
export function shortestBest(plans: readonly SlotPlan[], mostMin: number): SlotPlan | undefined {
  const allowed = plans.filter((p) => p.slotMin <= mostMin && p.screening > 0);
  const better = (a: SlotPlan, b: SlotPlan) =>
    a.diagnostic - b.diagnostic || a.targeted - b.targeted || a.screening - b.screening;
  return allowed.reduce<SlotPlan | undefined>(
    (best, plan) => (best === undefined || better(plan, best) > 0 ? plan : best),
    undefined,
  );
}

/** Open stretches: the hours with the breaks taken out. */
function simScanner({ id, hours, breaks }: Scanner): SimScanner {
  const open = [...hours]
    .sort((a, b) => a.fromMin - b.fromMin)
    .flatMap(({ fromMin, toMin }) => {
      const pieces: [number, number][] = [];
      let from = fromMin;
      for (const pause of [...breaks].sort((a, b) => a.fromMin - b.fromMin)) {
        if (pause.toMin <= from || pause.fromMin >= toMin) continue;
        if (pause.fromMin > from) pieces.push([from, pause.fromMin]);
        from = pause.toMin;
      }
      if (from < toMin) pieces.push([from, toMin]);
      return pieces;
    });
  return { id, open };
}
