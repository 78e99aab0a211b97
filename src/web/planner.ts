import { offersFor, type RequestOffers, type Scanner } from '../day/index.js';
import {
  chooseCurve,
  planExam,
  type ExamRequest,
  type Plan,
  type PlanOutcome,
} from '../planning/index.js';
import { z } from 'zod';
import { grades } from '../exams/index.js';
import type { WebDeps } from './deps.js';

/** What the board keeps of a plan, beside the booking. Grades never without their words. */
export const planSummary = z.strictObject({
  chanceToFinish: z.number(),
  medianS: z.number(),
  ninetiethS: z.number(),
  answers: z.array(
    z.strictObject({
      questionId: z.string(),
      name: z.string(),
      grade: z.enum(grades),
      words: z.string(),
    }),
  ),
});
export type PlanSummary = z.infer<typeof planSummary>;

export function summaryOf(plan: Plan): PlanSummary {
  return {
    chanceToFinish: plan.chanceToFinish,
    medianS: plan.tableTime.medianS,
    ninetiethS: plan.tableTime.ninetiethS,
    answers: plan.answers.map(({ questionId, name, grade, words }) => ({
      questionId,
      name,
      grade,
      words,
    })),
  };
}

const mostKept = 400;

/** Plans on demand and keeps the latest few hundred: the same request on the same scanner in the same slot is planned once. */
export class Planner {
  private readonly kept = new Map<string, Promise<PlanOutcome>>();
  private readonly offered = new Map<string, RequestOffers>();
  constructor(private readonly deps: Pick<WebDeps, 'ground' | 'department' | 'solver'>) {}

  plan(request: ExamRequest, scanner: Scanner, slotS = request.slotS): Promise<PlanOutcome> {
    const asked = { ...request, slotS };
    const key = `${scanner.id}|${JSON.stringify(asked)}`;
    const known = this.kept.get(key);
    if (known !== undefined) return known;
    const made = planExam(asked, scanner, this.deps.ground, {
      solver: this.deps.solver,
      otherScanners: this.deps.department.scanners,
    });
    if (this.kept.size >= mostKept) this.kept.delete(this.kept.keys().next().value as string);
    this.kept.set(key, made);
    return made;
  }
  /** What each scanner can offer a request along the usual slot lengths: seconds for a whole week, so it is kept too. */
  offers(request: ExamRequest): RequestOffers {
    const key = JSON.stringify(request);
    let offered = this.offered.get(key);
    if (offered === undefined) {
      const { ground, department } = this.deps;
      offered = offersFor(request, department.scanners, ground, chooseCurve);
      if (this.offered.size >= mostKept)
        this.offered.delete(this.offered.keys().next().value as string);
      this.offered.set(key, offered);
    }
    return offered;
  }
}
