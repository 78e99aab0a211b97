import { clock } from './conflicts.js';
import { stepMin } from './fill-problem.js';
import { MendGrid } from './mend-grid.js';
import {
  farShiftMin,
  type MendOutcome,
  type MendProblem,
  type Move,
  type Repair,
} from './mend-problem.js';
import { bare, noShow } from './mend-no-show.js';
import { changedAnswers, samePlace, scannerName } from './mend-words.js';
import {
  offerAt,
  rearrange,
  type Mover,
  type Rearranged,
  type RepairRules,
} from './mend-search.js';
import type { Booking, Department } from './scanners.js';

export interface MendOptions {
  readonly nodeBudget?: number;
}

interface Moment {
  readonly date: string;
  readonly minute: number;
}

const before = (a: Moment, b: Moment) =>
  a.date < b.date || (a.date === b.date && a.minute < b.minute);
const startOf = (b: Booking): Moment => ({ date: b.date, minute: b.startMin });
const later = (a: Moment, b: Moment): Moment => (before(a, b) ? b : a);

/** Whether somebody is on the way in, or has come already, and must not be moved. */
export function onTheWayIn(
  problem: Pick<MendProblem, 'movableFrom' | 'onTheWay'>,
  visit: Booking,
): boolean {
  return (
    before(startOf(visit), problem.movableFrom) || problem.onTheWay?.has(visit.requestId) === true
  );
}

/** Limits on everybody's shift that are tried, tightest first. */
const shiftLimitsMin = [60, farShiftMin];

/**
 * The least disturbing repairs after an event: fewest without a place, fewest moved, least shift; nobody on the way in is
 * moved. Where that moves somebody far, a proposal in which nobody moves far stands beside it, with more people moved;
 * and one with shorter slots at the cost of answers, where it disturbs fewer. Nothing is applied.
 */
export function mend(problem: MendProblem, options: MendOptions = {}): MendOutcome {
  if (problem.event.kind === 'no-show') return noShow(problem, problem.event.requestId);
  const nodeBudget = options.nodeBudget ?? 4000;
  const kept = repair(problem, { shorterSlots: false }, nodeBudget);
  const nearer = nearerThan(kept, problem, nodeBudget);
  const beside = nearer === undefined ? [kept] : [kept, nearer];
  if (kept.peopleMoved < 2 && kept.withoutPlace.length === 0) return { proposals: beside };
  const shorter = repair(problem, { shorterSlots: true }, nodeBudget);
  const disturbsFewer =
    shorter.withoutPlace.length < kept.withoutPlace.length ||
    (shorter.withoutPlace.length === kept.withoutPlace.length &&
      shorter.peopleMoved < kept.peopleMoved);
  return { proposals: disturbsFewer ? [...beside, shorter] : beside };
}

/** A repair in which nobody moves far and nobody more is left without a place, where the first moves somebody far. */
function nearerThan(kept: Repair, problem: MendProblem, nodeBudget: number): Repair | undefined {
  const longest = Math.max(0, ...kept.moves.map((m) => (m.from === undefined ? 0 : m.shiftMin)));
  if (longest <= farShiftMin) return undefined;
  return shiftLimitsMin
    .map((shiftLimitMin) => repair(problem, { shorterSlots: false, shiftLimitMin }, nodeBudget))
    .find((r) => r.withoutPlace.length <= kept.withoutPlace.length);
}

function repair(problem: MendProblem, rules: RepairRules, nodeBudget: number): Repair {
  const { department, event, visits } = problem;
  const grid = new MendGrid(department);
  const movers: Mover[] = visits.map((visit) => ({
    request: visit.request,
    home: visit,
    aim: startOf(visit),
    earliest: later(problem.movableFrom, problem.now),
    sameDay: false,
  }));
  const displaced: number[] = [];
  const stuck: { requestId: string; why: string }[] = [];
  const waitOnSite: { requestId: string; from: Booking; to: Booking }[] = [];
  const fixed = visits.map((visit) => onTheWayIn(problem, visit));
  const place = visits.map((visit): Booking => bare(visit));

  // Whoever is there already stands where they stand, even in a break or after hours (an exam that ran over).
  for (const [v, visit] of visits.entries()) if (fixed[v]) grid.open(visit);
  if (event.kind === 'scanner down' || event.kind === 'staff gone') {
    grid.close(event.scannerId, event.date, event.fromMin, event.toMin);
  } else if (event.kind === 'team gone') {
    grid.closeTeam(event.team, event.date, event.fromMin, event.toMin);
  } else if (event.kind === 'overrun') {
    const v = visits.findIndex((visit) => visit.requestId === event.requestId);
    if (v >= 0) {
      fixed[v] = true;
      place[v] = { ...place[v]!, slotMin: place[v]!.slotMin + event.minutes };
    }
  } else if (event.kind === 'late') {
    const v = visits.findIndex((visit) => visit.requestId === event.requestId);
    if (v >= 0) {
      const from: Moment = { date: visits[v]!.date, minute: visits[v]!.startMin + event.minutes };
      fixed[v] = false;
      movers[v] = { ...movers[v]!, earliest: later(from, problem.now), sameDay: true };
      displaced.push(v);
    }
  } else if (event.kind === 'emergency') {
    const { now } = problem;
    movers.push({
      request: event.request,
      aim: now,
      earliest: now,
      sameDay: event.request.priority === 'stat',
    });
    displaced.push(movers.length - 1);
  }

  // Those on their way in keep their places, in order; behind an overrun they begin later.
  const order = visits
    .map((_, v) => v)
    .filter((v) => fixed[v])
    .sort((a, b) => place[a]!.startMin - place[b]!.startMin);
  for (const v of order) {
    const visit = visits[v]!;
    const subject = event.kind === 'overrun' && visit.requestId === event.requestId;
    if (subject) {
      grid.close(visit.scannerId, visit.date, visit.startMin, visit.startMin + place[v]!.slotMin);
      if (visit.team !== undefined)
        grid.closeTeam(visit.team, visit.date, visit.startMin, visit.startMin + place[v]!.slotMin);
      continue;
    }
    const delayed = firstFree(grid, place[v]!, visit.team);
    const down = event.kind !== 'overrun' && delayed?.startMin !== visit.startMin;
    if (delayed === undefined || down) {
      stuck.push({
        requestId: visit.requestId,
        why: `on the way in for ${at(visit, department)}, and cannot be served there then: speak with them on arrival`,
      });
      // Their booking stands until somebody has spoken with them.
      grid.close(visit.scannerId, visit.date, visit.startMin, visit.startMin + visit.slotMin);
      continue;
    }
    if (delayed.startMin !== visit.startMin)
      waitOnSite.push({ requestId: visit.requestId, from: bare(visit), to: delayed });
    grid.close(
      delayed.scannerId,
      delayed.date,
      delayed.startMin,
      delayed.startMin + delayed.slotMin,
    );
    if (visit.team !== undefined)
      grid.closeTeam(
        visit.team,
        delayed.date,
        delayed.startMin,
        delayed.startMin + delayed.slotMin,
      );
  }
  // Everybody else stands where they stood, unless something closed is in the way now.
  visits.forEach((visit, v) => {
    if (fixed[v] === true || displaced.includes(v)) return;
    if (grid.inTheWay(visit, visit.team, 99) === undefined) displaced.push(v);
    else grid.mark(visit, visit.team, v);
  });

  const arranged = rearrange(department, movers, displaced, grid, rules, nodeBudget);
  return described(problem, movers, arranged, { stuck, waitOnSite, ...rules });
}

/** The first start from the own one on at which the own scanner has room among what is closed. */
function firstFree(grid: MendGrid, own: Booking, team: string | undefined): Booking | undefined {
  for (let startMin = own.startMin; startMin + own.slotMin <= 24 * 60; startMin += stepMin) {
    const to = { ...own, startMin };
    if (grid.inTheWay(to, team, 99) !== undefined) return to;
  }
  return undefined;
}

function described(
  problem: MendProblem,
  movers: readonly Mover[],
  { replaced, dropped, fewest }: Rearranged,
  rest: Pick<Repair, 'stuck' | 'waitOnSite'> & RepairRules,
): Repair {
  const moves = replaced.map(({ mover: m, to, shiftMin, pushedBy }): Move => {
    const { request, home } = movers[m]!;
    const was = home === undefined ? undefined : offerAt(request, home);
    const is = offerAt(request, to);
    const diagnosticChange = (is?.diagnostic ?? 0) - (was?.diagnostic ?? 0);
    const same =
      was?.diagnostic === is?.diagnostic &&
      was?.targeted === is?.targeted &&
      was?.screening === is?.screening;
    return {
      requestId: request.id,
      ...(home === undefined ? {} : { from: bare(home) }),
      to,
      shiftMin,
      diagnosticChange,
      answers:
        is === undefined
          ? 'same slot on the same scanner'
          : home === undefined
            ? `gets: ${is.words}`
            : same
              ? 'same answers'
              : `${diagnosticChange < 0 ? 'loses' : diagnosticChange > 0 ? 'gains' : 'changes'}: ${was === undefined ? is.words : changedAnswers(was.words, is.words)}`,
      because:
        pushedBy === undefined
          ? causeWords(problem)
          : `its place is needed for ${movers[pushedBy]!.request.id}`,
    };
  });
  const booked = moves.filter((m) => m.from !== undefined && !samePlace(m.from, m.to));
  return {
    ...rest,
    moves: moves.filter((m) => m.from === undefined || !sameBooking(m.from, m.to)).sort(byTime),
    withoutPlace: dropped.map((m) => ({
      requestId: movers[m]!.request.id,
      why: `no place on the planned days that suits the patient, the scanner and those on their way in (${causeWords(problem)})`,
    })),
    peopleMoved: booked.length + dropped.filter((m) => movers[m]!.home !== undefined).length,
    shiftMin: moves.reduce((sum, m) => sum + m.shiftMin, 0),
    fewest,
  };
}

function causeWords({ event, department }: MendProblem): string {
  switch (event.kind) {
    case 'scanner down':
    case 'staff gone':
      return `${scannerName(event.scannerId, department)} ${event.kind === 'scanner down' ? 'is down' : 'has no staff'} ${clock(event.fromMin)} to ${clock(event.toMin)}`;
    case 'team gone':
      return `${event.team} is away ${clock(event.fromMin)} to ${clock(event.toMin)}`;
    case 'late':
      return `${event.requestId} is ${event.minutes} min late`;
    case 'overrun':
      return `${event.requestId} runs over by ${event.minutes} min`;
    case 'emergency':
      return `${event.request.id} is ${event.request.priority}`;
    case 'no-show':
      return `${event.requestId} did not come`;
  }
}

/** As a desk reads them: an emergency first, then by the time people were booked for. */
const byTime = (a: Move, b: Move): number => {
  if (a.from === undefined || b.from === undefined) return a.from === undefined ? -1 : 1;
  return before(startOf(a.from), startOf(b.from)) ? -1 : 1;
};
const sameBooking = (a: Booking, b: Booking) => samePlace(a, b) && a.slotMin === b.slotMin;
const at = (b: Booking, department: Department) =>
  `${scannerName(b.scannerId, department)}, ${b.date} ${clock(b.startMin)}`;
