import { rankOf, type SitePolicy } from '../exams/index.js';
import type { Survival } from '../tolerance/index.js';
import type { Candidate, Cast } from './cast.js';
import { bestOrder, type OrderItem } from './order.js';

/** One step of the exam in its place: a sequence, or the injection. Seconds since entry into the scanner. */
export interface OrderedStep {
  readonly kind: 'sequence' | 'injection';
  readonly candidate?: Candidate;
  readonly startS: number;
  readonly endS: number;
}

/** Value of an answer by grade, for weighing what is lost when the patient gives up: ours, an assumption. */
const answerValue = [0, 1, 3, 9] as const;
const injectionId = 'injection';

/**
 * Puts the chosen sequences in the order that keeps the most answers if the patient gives up
 * part-way: exact over all orders that respect before and after contrast and timed phases. The
 * localiser comes first and is not listed.
 */
export function runningOrder(
  cast: Cast,
  chosen: readonly Candidate[],
  stay: Survival,
  localiserS: number,
  policy: SitePolicy,
): readonly OrderedStep[] {
  if (chosen.length === 0) return [];
  const idleS = policy.time.idleBetweenS.value;
  const byId = new Map(chosen.map((c) => [c.view.id, c]));
  const injected = chosen.some((c) => c.view.contrast === 'after');
  const before = chosen.filter((c) => c.view.contrast === 'before').map((c) => c.view.id);
  const items: OrderItem[] = chosen.map((c) => ({
    id: c.view.id,
    durationS: c.time.acquisitionS + idleS,
    after: c.view.contrast === 'after' ? [injectionId] : [],
    ...(c.view.contrast === 'after' && c.sequence.earliestAfterInjectionS !== undefined
      ? { earliestAfterInjectionS: c.sequence.earliestAfterInjectionS }
      : {}),
    ...(c.view.contrast === 'after' && c.sequence.latestAfterInjectionS !== undefined
      ? { latestAfterInjectionS: c.sequence.latestAfterInjectionS }
      : {}),
  }));
  if (injected) {
    items.push({
      id: injectionId,
      durationS: policy.time.injection.value.meanS,
      after: before,
      injection: true,
    });
  }
  const questions = cast.questions.flatMap((q) => {
    const ranks = q.needs.map((need) => {
      const answer = byId.get(need.view)?.answers.get(q.id);
      return answer === undefined ? 0 : rankOf(answer.grade);
    });
    const clean = q.needs.reduce((p, need) => p * (byId.get(need.view)?.clean.clean ?? 0), 1);
    const value = q.weight * (answerValue[Math.min(...ranks) as 0 | 1 | 2 | 3] ?? 0) * clean;
    return value > 0 ? [{ id: q.id, value, needs: q.needs.map((n) => n.view) }] : [];
  });
  const order =
    bestOrder({ items, questions, survival: stay, startS: localiserS }) ??
    bestOrder({
      items: items.map((item) => withoutLatest(item)),
      questions,
      survival: stay,
      startS: localiserS,
    });
  if (order === undefined) throw new Error('no running order respects before and after contrast');
  return order.ids.map((id, index) => {
    const startS = order.startsS[index] ?? 0;
    const candidate = byId.get(id);
    return candidate === undefined
      ? { kind: 'injection', startS, endS: startS + policy.time.injection.value.meanS }
      : { kind: 'sequence', candidate, startS, endS: startS + candidate.time.acquisitionS };
  });
}

/** Timed phases that cannot all be met in time are run as early as the rest allows. */
function withoutLatest(item: OrderItem): OrderItem {
  const { latestAfterInjectionS, ...rest } = item;
  return rest;
}
