import { canComeAt, clock, type DayStretch, type Scanner } from '../../day/index.js';
import { rankOf, type Grade } from '../../exams/index.js';
import { priorities } from '../../planning/index.js';
import type { StoredRequest } from '../../store/index.js';
import type { Planner } from '../planner.js';
import { chanceWords } from './day-board.js';

/** A waiting request held against a free gap: what it would get there, or why it does not fit. */
export interface GapOffer {
  readonly requestId: string;
  readonly exam: string;
  readonly priority: string;
  readonly dueDate?: string;
  readonly slotMin: number;
  readonly start?: string;
  readonly startMin?: number;
  readonly why?: string;
  readonly chance?: string;
  readonly answers: readonly {
    readonly name: string;
    readonly grade: Grade;
    readonly words: string;
  }[];
}

/** Which waiting requests fit a gap, the most urgent and best answered first; the rest with the reason. */
export async function gapOffers(input: {
  readonly gap: DayStretch;
  readonly date: string;
  readonly scanner: Scanner;
  readonly waiting: readonly StoredRequest[];
  readonly planner: Planner;
  readonly examName: (examId: string) => string;
}): Promise<readonly GapOffer[]> {
  const offers: GapOffer[] = [];
  for (const { body } of input.waiting) {
    const slotMin = Math.ceil(body.slotS / 60);
    const common = {
      requestId: body.id,
      exam: input.examName(body.examId),
      priority: body.priority,
      ...(body.dueDate === undefined ? {} : { dueDate: body.dueDate }),
      slotMin,
    };
    const fit = canComeAt(body.canCome, input.date, input.gap, slotMin);
    if ('why' in fit) {
      offers.push({ ...common, why: fit.why, answers: [] });
      continue;
    }
    const outcome = await input.planner.plan(body, input.scanner);
    if (outcome.kind === 'refused') {
      offers.push({
        ...common,
        why: outcome.problems[0]?.limit ?? 'cannot be planned here',
        answers: [],
      });
      continue;
    }
    const { plan } = outcome;
    offers.push({
      ...common,
      startMin: fit.startMin,
      start: clock(fit.startMin),
      chance: chanceWords(plan.chanceToFinish),
      answers: plan.answers.map(({ name, grade, words }) => ({ name, grade, words })),
    });
  }
  return offers.sort(
    (a, b) =>
      Number(a.why !== undefined) - Number(b.why !== undefined) ||
      urgency(b.priority) - urgency(a.priority) ||
      worth(b) - worth(a) ||
      a.requestId.localeCompare(b.requestId),
  );
}

const urgency = (priority: string) => priorities.indexOf(priority as (typeof priorities)[number]);
const worth = (offer: GapOffer) =>
  offer.answers.length === 0
    ? 0
    : offer.answers.reduce((sum, a) => sum + rankOf(a.grade), 0) / offer.answers.length;
