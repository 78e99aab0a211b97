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

export interface OrderRequest {
  readonly cast: Cast;
  readonly chosen: readonly Candidate[];
  /** Views that are in already, clean: at the scanner, part of the exam has been run. */
  readonly done?: ReadonlyMap<string, Candidate>;
  /** Chance that the patient is still in the scanner, by seconds on the order's clock. */
  readonly stay: Survival;
  /** When the first sequence can start, s on the same clock. */
  readonly startS: number;
  readonly policy: SitePolicy;
  /** Seconds since the injection ended, where it has been given. */
  readonly injectedAgoS?: number;
  /** View that is to come first whatever that costs. */
  readonly first?: string;
}

/**
 * Puts the chosen sequences in the order that keeps the most answers if the patient gives up
 * part-way: exact over all orders that respect before and after contrast and timed phases. The
 * localiser comes first and is not listed.
 */
export function runningOrder(request: OrderRequest): readonly OrderedStep[] {
  const { cast, chosen, stay, startS, policy } = request;
  if (chosen.length === 0) return [];
  const done = request.done ?? new Map<string, Candidate>();
  const byId = new Map(chosen.map((c) => [c.view.id, c]));
  const items = itemsOf(request);
  const questions = cast.questions.flatMap((q) => {
    const serving = q.needs.map((need) => byId.get(need.view) ?? done.get(need.view));
    const ranks = serving.map((c) => {
      const answer = c?.answers.get(q.id);
      return answer === undefined ? 0 : rankOf(answer.grade);
    });
    const open = q.needs.map((n) => n.view).filter((view) => byId.has(view));
    const clean = open.reduce((p, view) => p * (byId.get(view)?.clean.clean ?? 0), 1);
    const rank = Math.min(...ranks) as 0 | 1 | 2 | 3;
    const value = q.weight * (answerValue[rank] ?? 0) * clean;
    return value > 0 && open.length > 0 ? [{ id: q.id, value, needs: open }] : [];
  });
  const order =
    bestOrder({ items, questions, survival: stay, startS }) ??
    bestOrder({ items: items.map(withoutLatest), questions, survival: stay, startS });
  if (order === undefined) throw new Error('no running order respects before and after contrast');
  const given = request.injectedAgoS !== undefined;
  return order.ids.flatMap((id, index): OrderedStep[] => {
    const startS = order.startsS[index] ?? 0;
    const candidate = byId.get(id);
    if (candidate !== undefined) {
      return [{ kind: 'sequence', candidate, startS, endS: startS + candidate.time.acquisitionS }];
    }
    const endS = startS + policy.time.injection.value.meanS;
    return given ? [] : [{ kind: 'injection', startS, endS }];
  });
}

/** Sequences and, where one is still to come or its time still counts, the injection. */
function itemsOf(request: OrderRequest): readonly OrderItem[] {
  const { chosen, policy, injectedAgoS, first } = request;
  const idleS = policy.time.idleBetweenS.value;
  const given = injectedAgoS !== undefined;
  const injected = chosen.some((c) => c.view.contrast === 'after');
  const left = (limitS: number) => Math.max(0, limitS - (injectedAgoS ?? 0));
  const items: OrderItem[] = chosen.map(({ view, sequence, time }) => {
    const { earliestAfterInjectionS: earliest, latestAfterInjectionS: latest } = sequence;
    const after = view.contrast === 'after';
    return {
      id: view.id,
      durationS: time.acquisitionS + idleS,
      after: [
        ...(after ? [injectionId] : []),
        ...(first !== undefined && mustWait(view.id, first, chosen) ? [first] : []),
      ],
      ...(after && earliest !== undefined ? { earliestAfterInjectionS: left(earliest) } : {}),
      ...(after && latest !== undefined ? { latestAfterInjectionS: left(latest) } : {}),
    };
  });
  if (!injected) return items;
  const before = chosen.filter((c) => c.view.contrast === 'before').map((c) => c.view.id);
  return [
    ...items,
    {
      id: injectionId,
      durationS: given ? 0 : policy.time.injection.value.meanS,
      after: given ? [] : before,
      injection: true,
    },
  ];
}

/** Whether a view waits for the one asked for first: not if that one itself needs this one before the injection. */
function mustWait(viewId: string, first: string, chosen: readonly Candidate[]): boolean {
  const own = chosen.find((c) => c.view.id === viewId);
  const asked = chosen.find((c) => c.view.id === first);
  if (asked === undefined || viewId === first) return false;
  return !(asked.view.contrast === 'after' && own?.view.contrast === 'before');
}

/** Timed phases that cannot all be met in time are run as early as the rest allows. */
function withoutLatest(item: OrderItem): OrderItem {
  const { latestAfterInjectionS, ...rest } = item;
  return rest;
}
