import { scaleLinear } from 'd3-scale';
import type { Grade } from '../../exams/index.js';
import type { Plan, PlanStep, PlannedAnswer } from '../../planning/index.js';
import { tableTimeChart } from '../charts/table-time-chart.js';
import { chanceWords } from './day-board.js';

/** A plan as a page shows it: everything already in words. */
export interface PlanSheet {
  readonly plan: Plan;
  readonly headline: string;
  readonly holds: boolean;
  readonly shorter?: string;
  /** Table time against the slot, as SVG; none where nothing is run. */
  readonly tableTime?: string;
  readonly steps: readonly SheetStep[];
  /** Time axis of the running order: round minutes, and their distance. */
  readonly axis: { readonly ticks: readonly SheetTick[]; readonly stepPercent: number };
  readonly answers: readonly PlannedAnswer[];
  readonly slots: readonly SheetSlot[];
  readonly worstIsDiagnostic: boolean;
}

export interface SheetStep {
  readonly kind: PlanStep['kind'];
  readonly name: string;
  readonly href?: string;
  readonly starts: string;
  readonly takes: string;
  readonly stillness: string;
  readonly chance: string;
  readonly leftPercent: number;
  readonly widthPercent: number;
}

export interface SheetTick {
  readonly minutes: number;
  readonly leftPercent: number;
}

/** One slot length on the time-answer curve. */
export interface SheetSlot {
  readonly minutes: number;
  readonly asked: boolean;
  readonly href?: string;
  readonly chance: string;
  readonly runs: boolean;
  readonly grades: readonly {
    readonly questionId: string;
    readonly grade: Grade;
    readonly words: string;
  }[];
}

/** @param where.linkTo address the slot lengths link to, with `?slot=`; none beside an open form */
export function planSheet(plan: Plan, where: { readonly linkTo: string | undefined }): PlanSheet {
  const { tenthS, medianS, ninetiethS } = plan.tableTime;
  const empty = plan.steps.length === 1;
  const slotMin = Math.round(plan.slotS / 60);
  const holds = plan.chanceToFinish >= plan.wishedChance && !empty;
  const { sameGradesFromS } = plan.alternatives;
  const endS = Math.max(1, ...plan.steps.map((s) => s.endS));
  return {
    plan,
    holds,
    headline: empty
      ? `Nothing fits into ${slotMin} minutes: getting in and out alone takes ${minutes(tenthS)} to ${minutes(ninetiethS)}.`
      : `${chanceWords(plan.chanceToFinish)} chance to end inside ${slotMin} minutes. Table time about ${minutes(medianS)}; 8 in 10 between ${minutes(tenthS)} and ${minutes(ninetiethS)}.`,
    ...(holds && sameGradesFromS < plan.slotS
      ? { shorter: `${minutes(sameGradesFromS)} would give the same grades.` }
      : {}),
    ...(empty ? {} : { tableTime: tableTimeChart({ ...plan.tableTime, slotS: plan.slotS }) }),
    steps: plan.steps.map((step) => sheetStep(step, endS, plan.scanner.fieldT)),
    axis: timeAxis(endS),
    answers: plan.answers,
    slots: plan.curve.map((point) => ({
      minutes: Math.round(point.slotS / 60),
      asked: point.slotS === plan.slotS,
      ...(where.linkTo === undefined
        ? {}
        : { href: `${where.linkTo}?slot=${Math.round(point.slotS / 60)}` }),
      chance: chanceWords(point.chanceToFinish),
      runs: point.sequences.length > 0,
      grades: point.grades,
    })),
    worstIsDiagnostic: plan.answers.every((a) => a.grade === 'diagnostic'),
  };
}

/** Round minutes along the running order; the last few percent stay free of figures, which would stick out. */
function timeAxis(endS: number): PlanSheet['axis'] {
  const ticks = scaleLinear()
    .domain([0, endS / 60])
    .ticks(4)
    .map((at) => ({ minutes: at, leftPercent: (100 * at) / (endS / 60) }));
  return {
    ticks: ticks.filter((t) => t.leftPercent > 0 && t.leftPercent < 95),
    stepPercent: ticks[1]?.leftPercent ?? 100,
  };
}

function sheetStep(step: PlanStep, endS: number, fieldT: number): SheetStep {
  return {
    kind: step.kind,
    name: step.name,
    ...(step.sequenceId === undefined
      ? {}
      : { href: `/library/sequences/${step.sequenceId}?field=${fieldT}` }),
    starts: minSec(step.startS),
    takes: minSec(step.endS - step.startS),
    stillness: step.stillness ?? '',
    chance: step.cleanChance === undefined ? '' : chanceWords(step.cleanChance),
    leftPercent: (100 * step.startS) / endS,
    widthPercent: Math.max(0.8, (100 * (step.endS - step.startS)) / endS),
  };
}

const minutes = (seconds: number) => `${Math.round(seconds / 60)} min`;

function minSec(seconds: number): string {
  const whole = Math.round(seconds);
  return `${Math.floor(whole / 60)}:${String(whole % 60).padStart(2, '0')}`;
}
