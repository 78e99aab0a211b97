import type { Scanner } from '../day/index.js';
import {
  mixture,
  type Distribution,
  type ExamRequest,
  type PlanningGround,
} from '../planning/index.js';
import { kindsOf } from './kinds.js';
import type { PlanBook } from './plan-book.js';
import type { PatientGroup } from './scenario.js';
import { slotAdvice, type AdviceAsked, type SlotAdvice } from './slot-advice.js';
import { shortestBest } from './work-out.js';

/** Slot advice for one exam and patient group. */
export interface AdviceRow {
  readonly examId: string;
  readonly exam: string;
  readonly group: PatientGroup;
  /** Kinds of request on record that it rests on. */
  readonly kinds: number;
  readonly tableTime: Distribution;
  readonly advice: SlotAdvice;
}

const longestMin = 90;

/**
 * Slot advice per exam and patient group of the requests on record: the table times of what would be planned for each of
 * them, mixed by how often they come, over the scanners that can take them.
 */
export function* adviceTable(
  requests: readonly ExamRequest[],
  scanners: readonly Scanner[],
  ground: PlanningGround,
  book: PlanBook,
  asked: AdviceAsked & { readonly quickLooks: boolean },
): Generator<{ readonly done: number; readonly of: number }, readonly AdviceRow[]> {
  const kinds = kindsOf(requests);
  const cells = new Map<
    string,
    {
      examId: string;
      group: PatientGroup;
      kinds: number;
      parts: { weight: number; of: Distribution }[];
    }
  >();
  for (const [n, { request, group, weight }] of kinds.entries()) {
    yield { done: n, of: kinds.length };
    const key = `${request.examId}|${group}`;
    const cell = cells.get(key) ?? { examId: request.examId, group, kinds: 0, parts: [] };
    const times = scanners.flatMap((scanner) => {
      const plans = book.plansFor(request, scanner, asked.quickLooks) ?? [];
      const plan = shortestBest(plans, longestMin) ?? book.fullFor(request, scanner);
      return plan === undefined ? [] : [{ weight, of: plan.tableTime }];
    });
    if (times.length === 0) continue;
    cell.kinds += 1;
    cell.parts.push(...times);
    cells.set(key, cell);
  }
  return [...cells.values()]
    .map(({ examId, group, kinds: count, parts }): AdviceRow => {
      const tableTime = mixture(parts);
      return {
        examId,
        exam: ground.library.exams.get(examId)?.name ?? examId,
        group,
        kinds: count,
        tableTime,
        advice: slotAdvice(tableTime, asked),
      };
    })
    .sort((a, b) => a.exam.localeCompare(b.exam) || a.group.localeCompare(b.group));
}
