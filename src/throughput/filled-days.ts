import {
  fillAll,
  repeatableStream,
  waitingRequest,
  type Department,
  type FillProposal,
  type Offer,
  type RequestOffers,
} from '../day/index.js';
import type { ExamRequest, PlanningGround } from '../planning/index.js';
import { randomStream } from '../shared/index.js';
import { drawsPerExam, emptyRun, runExam } from './exam-run.js';
import { meanWithLimits, type Estimate } from './estimate.js';
import type { PlanBook } from './plan-book.js';
import type { SlotPlan } from './run-plan.js';
import { serveDay, type Visit } from './serve-day.js';
import type { SlotRule } from './scenario.js';

/** The same requests filled into the same days under one slot rule, and what became of it. */
export interface FilledDays {
  readonly rule: Extract<SlotRule, { readonly kind: 'fixed' | 'tolerance' }>;
  readonly requests: number;
  readonly placed: number;
  /** Simulated, over all days: questions answered diagnostically. */
  readonly diagnostic: Estimate;
  /** Exams longer than their slot. */
  readonly overruns: Estimate;
  /** Minutes past closing, all scanners and days together. */
  readonly overtimeMin: Estimate;
  /** Longest wait of a day past the appointment, mean over days. */
  readonly longestWaitMin: Estimate;
}

export interface FilledDaysAsked {
  readonly requests: readonly ExamRequest[];
  readonly department: Department;
  readonly ground: PlanningGround;
  readonly book: PlanBook;
  /** Times each filled plan is lived through. */
  readonly repeats: number;
  readonly seed: number;
  readonly iterations: number;
}

const quickLooks = true;

/**
 * Fills the requests into the department's free days under a slot rule and lives the days through: the exams planned for each
 * place, with each request's own luck, which is the same under every rule. Everybody comes in time; what runs late pushes
 * the next.
 */
export function fillAndLive(rule: FilledDays['rule'], asked: FilledDaysAsked): FilledDays {
  const { requests, department, ground, book, repeats, iterations } = asked;
  const plansOn = (request: ExamRequest, scannerId: string) => {
    const scanner = department.scanners.find((s) => s.id === scannerId);
    return (scanner && book.plansFor(request, scanner, quickLooks)) ?? [];
  };
  const waiting = requests.map((request) => {
    const offers = new Map<string, readonly Offer[]>();
    for (const { id } of department.scanners) {
      const allowed = allowedBy(rule, plansOn(request, id));
      if (allowed.length > 0) offers.set(id, allowed.map(offerOf));
    }
    const all: RequestOffers = { offers, cannot: new Map() };
    return waitingRequest(request, all, ground.library);
  });
  const proposal = fillAll(
    { department, taken: [], waiting },
    { random: repeatableStream(1), iterations },
  );
  const lives = Array.from({ length: repeats }, (_, n) => live(proposal, n));
  const over = (of: (l: ReturnType<typeof live>) => number) => meanWithLimits(lives.map(of));
  return {
    rule,
    requests: requests.length,
    placed: proposal.placements.length,
    diagnostic: over((l) => l.diagnostic),
    overruns: over((l) => l.overruns),
    overtimeMin: over((l) => l.overtimeMin),
    longestWaitMin: over((l) => l.longestWaitMin),
  };

  /** One life of the filled days. */
  function live({ placements }: FillProposal, repeat: number) {
    const run = emptyRun();
    const total = { diagnostic: 0, overruns: 0, overtimeMin: 0, longestWaitMin: 0 };
    for (const date of department.days) {
      const today = placements.filter((p) => p.date === date);
      const visits = today.map((p): Visit => {
        const scanner = department.scanners.findIndex((s) => s.id === p.scannerId);
        return {
          ...{ readyMin: p.startMin, scanner, able: 1 << scanner, order: p.startMin },
          ...{ team: -1, staff: 1 },
        };
      });
      const served = serveDay(
        visits,
        {
          scanners: department.scanners.length,
          closed: department.scanners.map(() => []),
          teams: [],
          atOnce: department.scanners.length,
          lastStartMin: department.scanners.map(() => Infinity),
        },
        (v) => {
          const { requestId, scannerId, slotMin } = today[v]!;
          const request = requests.find((r) => r.id === requestId)!;
          const plan = plansOn(request, scannerId).find((p) => p.slotMin === slotMin)!;
          runExam(plan.run, luckOf(requestId, repeat), 0, Infinity, run);
          const minutes = run.tableS / 60;
          total.diagnostic += run.ranks.filter((rank) => rank === 3).length;
          total.overruns += minutes > slotMin ? 1 : 0;
          return minutes;
        },
      );
      let longest = 0;
      visits.forEach(({ readyMin }, v) => {
        longest = Math.max(longest, served.startMin[v]! - readyMin);
      });
      total.longestWaitMin += longest / department.days.length;
      department.scanners.forEach(({ hours }, s) => {
        const closes = Math.max(...hours.map((h) => h.toMin));
        let last = 0;
        served.endMin.forEach((end, v) => {
          if (served.scanner[v] === s) last = Math.max(last, end);
        });
        total.overtimeMin += Math.max(0, last - closes);
      });
    }
    return total;
  }

  /** A request's luck in one life: its own, whatever the rule and wherever it was placed. */
  function luckOf(requestId: string, repeat: number): Float64Array {
    const next = randomStream(asked.seed, `life ${repeat}/${requestId}`);
    return Float64Array.from({ length: drawsPerExam }, next);
  }
}

/** What a rule lets the filling choose from. Where one fixed slot answers nothing, two or three in a row may be taken. */
function allowedBy(rule: FilledDays['rule'], plans: readonly SlotPlan[]): readonly SlotPlan[] {
  const useful = plans.filter((p) => p.screening > 0);
  if (rule.kind === 'tolerance') return useful.filter((p) => p.slotMin <= rule.mostMin);
  for (let many = 1; many <= 3; many++) {
    const plan = useful.find((p) => p.slotMin === many * rule.minutes);
    if (plan !== undefined) return [plan];
  }
  return [];
}

const offerOf = (plan: SlotPlan): Offer => ({
  slotMin: plan.slotMin,
  diagnostic: plan.diagnostic,
  targeted: plan.targeted,
  screening: plan.screening,
  chance: plan.chance,
  words: '',
});
