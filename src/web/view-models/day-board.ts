import {
  freeGaps,
  clock,
  type Department,
  type DayStretch,
  type Scanner,
} from '../../day/index.js';
import { rankOf, type Grade } from '../../exams/index.js';
import type { StoredBooking, StoredRequest } from '../../store/index.js';
import { planSummary, type PlanSummary } from '../planner.js';

/** Shorter gaps take no exam and are not drawn. */
const leastGapMin = 10;

/** Hours drawn, from the earliest opening to the latest closing, whole hours. */
export interface BoardScale {
  readonly fromMin: number;
  readonly toMin: number;
  readonly hours: readonly { readonly label: string; readonly topPercent: number }[];
}

export interface BoardBlock {
  readonly kind: 'booking' | 'gap' | 'break';
  readonly topPercent: number;
  readonly heightPercent: number;
  readonly from: string;
  readonly to: string;
  readonly minutes: number;
  /** Address of what a click or Enter opens; empty for a break. */
  readonly href: string;
  readonly bookingId?: string;
  readonly version?: number;
  readonly requestId?: string;
  readonly exam?: string;
  readonly status?: string;
  readonly worst?: { readonly grade: Grade; readonly words: string };
  /** What must be read with the mark even in the smallest block; nothing when all is diagnostic. */
  readonly said?: string;
  readonly answers?: PlanSummary['answers'];
  readonly chance?: string;
  /** More than the policy's share of such exams would overrun. */
  readonly risky?: boolean;
}

export interface BoardColumn {
  readonly id: string;
  readonly name: string;
  readonly fieldT: number;
  readonly blocks: readonly BoardBlock[];
}

export interface DayBoard {
  readonly date: string;
  readonly scale: BoardScale;
  readonly columns: readonly BoardColumn[];
}

export interface BoardInput {
  readonly date: string;
  readonly department: Department;
  readonly bookings: readonly StoredBooking[];
  readonly requests: ReadonlyMap<string, StoredRequest>;
  readonly examName: (examId: string) => string;
  readonly wishedChance: number;
  /** What done exams answered, by request. */
  readonly recorded: ReadonlyMap<string, PlanSummary['answers']>;
}

/** Scanners side by side, bookings and free gaps to scale. */
export function dayBoard(input: BoardInput): DayBoard {
  const scale = scaleOf(input.department.scanners);
  return {
    date: input.date,
    scale,
    columns: input.department.scanners.map((scanner) => ({
      id: scanner.id,
      name: scanner.name,
      fieldT: scanner.fieldT,
      blocks: blocksOf(scanner, scale, input),
    })),
  };
}

function scaleOf(scanners: readonly Scanner[]): BoardScale {
  const hours = scanners.flatMap((s) => s.hours);
  const fromMin = Math.floor(Math.min(...hours.map((h) => h.fromMin)) / 60) * 60;
  const toMin = Math.ceil(Math.max(...hours.map((h) => h.toMin)) / 60) * 60;
  const labels = [];
  for (let at = fromMin; at <= toMin; at += 60) {
    labels.push({ label: clock(at), topPercent: (100 * (at - fromMin)) / (toMin - fromMin) });
  }
  return { fromMin, toMin, hours: labels };
}

function blocksOf(scanner: Scanner, scale: BoardScale, input: BoardInput): BoardBlock[] {
  const own = input.bookings.filter((b) => b.scannerId === scanner.id);
  const placed = (stretch: DayStretch) => ({
    topPercent: percentOf(stretch.fromMin - scale.fromMin, scale),
    heightPercent: percentOf(stretch.toMin - stretch.fromMin, scale),
    from: clock(stretch.fromMin),
    to: clock(stretch.toMin),
    minutes: stretch.toMin - stretch.fromMin,
  });
  const gaps = freeGaps(scanner, own, leastGapMin).map((gap): BoardBlock => ({
    kind: 'gap',
    ...placed(gap),
    href: `/day/${input.date}?gap=${scanner.id}_${gap.fromMin}_${gap.toMin}#panel`,
  }));
  const breaks = scanner.breaks.map((b): BoardBlock => ({ kind: 'break', ...placed(b), href: '' }));
  const bookings = own.map((b) =>
    bookingBlock(b, placed({ fromMin: b.startMin, toMin: b.startMin + b.slotMin }), input),
  );
  return [...gaps, ...breaks, ...bookings].sort((a, b) => a.topPercent - b.topPercent);
}

function bookingBlock(
  booking: StoredBooking,
  place: Pick<BoardBlock, 'topPercent' | 'heightPercent' | 'from' | 'to' | 'minutes'>,
  input: BoardInput,
): BoardBlock {
  const request = input.requests.get(booking.requestId);
  const summary = planSummary.safeParse(booking.plan);
  const plan = summary.success ? summary.data : undefined;
  const isDone = booking.status === 'fulfilled';
  // Once an exam is done its plan says nothing any more: what was recorded counts.
  const answers = isDone ? input.recorded.get(booking.requestId) : plan?.answers;
  const worst = [...(answers ?? [])].sort((a, b) => rankOf(a.grade) - rankOf(b.grade))[0];
  return {
    kind: 'booking',
    ...place,
    href: `/day/${input.date}?booking=${encodeURIComponent(booking.id)}#panel`,
    bookingId: booking.id,
    version: booking.version,
    requestId: booking.requestId,
    exam: request === undefined ? '' : input.examName(request.body.examId),
    status: booking.status,
    ...(answers === undefined ? {} : { answers }),
    ...(plan === undefined || isDone
      ? {}
      : {
          chance: chanceWords(plan.chanceToFinish),
          risky: plan.chanceToFinish < input.wishedChance,
        }),
    ...(worst === undefined ? {} : { worst: { grade: worst.grade, words: worst.words } }),
    ...(worst === undefined || worst.grade === 'diagnostic'
      ? {}
      : { said: boardWords[worst.grade] }),
  };
}

/** The lowest answer of an exam in the space a board has. */
const boardWords: Readonly<Record<Exclude<Grade, 'diagnostic'>, string>> = {
  targeted: 'lowest: this question only',
  screening: 'lowest: screening, not diagnostic',
  none: 'lowest: one not answered',
};

const percentOf = (minutes: number, scale: BoardScale) =>
  (100 * minutes) / (scale.toMin - scale.fromMin);

/** A chance as a board shows it. */
export function chanceWords(p: number): string {
  return p > 0.995 ? 'over 99 %' : `${Math.round(p * 100)} %`;
}
