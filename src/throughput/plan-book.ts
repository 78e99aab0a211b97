import type { SitePolicy } from '../exams/index.js';
import type { ExamRequest, PlanningGround } from '../planning/index.js';
import type { ScannerAbilities } from '../sequences/index.js';
import { fullProtocol, slotPlans, type SlotPlan } from './run-plan.js';

/** Slot lengths the month plans with, minutes. */
export const slotsMin: readonly number[] = Array.from({ length: 17 }, (_, n) => 10 + 5 * n);

/** The same policy with quick looks taken out: single-shot stands only where a signed entry accepts it as diagnostic. */
export function withoutQuickLooks(policy: SitePolicy): SitePolicy {
  const { otherwise, entries } = policy.catalogue;
  return {
    ...policy,
    catalogue: {
      otherwise: { ...otherwise, 'single-shot': { ...otherwise['single-shot'], value: 'none' } },
      entries: entries.filter((e) => e.family !== 'single-shot' || e.atMost === 'diagnostic'),
    },
  };
}

/** What each slot length is used for, per kind of request and scanner: worked out once, whichever scenario asks first. */
export class PlanBook {
  private readonly plans = new Map<string, ReturnType<typeof slotPlans>>();
  private readonly full = new Map<string, ReturnType<typeof fullProtocol>>();
  private readonly strict: PlanningGround;

  constructor(private readonly ground: PlanningGround) {
    const { library } = ground;
    this.strict = {
      ...ground,
      library: { ...library, policy: withoutQuickLooks(library.policy) },
    };
  }

  /** Plans along `slotsMin`; undefined where the scanner cannot take it. */
  plansFor(
    request: ExamRequest,
    scanner: ScannerAbilities,
    quickLooks: boolean,
  ): readonly SlotPlan[] | undefined {
    const key = `${quickLooks}|${this.keyOf(request, scanner)}`;
    let found = this.plans.get(key);
    if (found === undefined) {
      found = slotPlans(request, scanner, quickLooks ? this.ground : this.strict, slotsMin, {
        quickLooks,
      });
      keep(this.plans, key, found);
    }
    return 'cannot' in found ? undefined : found;
  }

  fullFor(request: ExamRequest, scanner: ScannerAbilities): SlotPlan | undefined {
    const key = this.keyOf(request, scanner);
    let found = this.full.get(key);
    if (found === undefined) {
      found = fullProtocol(request, scanner, this.ground);
      keep(this.full, key, found);
    }
    return 'cannot' in found ? undefined : found;
  }

  /** What a plan depends on: not the number, the day or the note of a request; of a scanner its field and whether it has the coil. */
  private keyOf(request: ExamRequest, scanner: ScannerAbilities): string {
    const { examId, questionIds, tolerance, contrast, transport, b1RmsLimitMicroTesla } = request;
    const coil = this.ground.library.exams.get(examId)?.coil ?? '';
    return JSON.stringify([
      examId,
      questionIds,
      tolerance,
      contrast,
      transport,
      b1RmsLimitMicroTesla ?? null,
      scanner.fieldT,
      scanner.coils.includes(coil),
    ]);
  }
}

/** Each holds distributions of thousands of points; a server that runs for months must not gather them all. */
const mostKept = 1500;

function keep<T>(kept: Map<string, T>, key: string, plans: T): void {
  const [oldest] = kept.size >= mostKept ? kept.keys() : [];
  if (oldest !== undefined) kept.delete(oldest);
  kept.set(key, plans);
}
