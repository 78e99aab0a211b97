import { clock } from './conflicts.js';
import { stepMin } from './fill-problem.js';
import { described } from './mend-described.js';
import { MendGrid } from './mend-grid.js';
import { later, onTheWayIn, startOf, type Moment } from './mend-moment.js';
import { bare } from './mend-no-show.js';
import type { MendProblem, Repair } from './mend-problem.js';
import { rearrange, type Mover, type RepairRules } from './mend-search.js';
import { scannerName } from './mend-words.js';
import type { Booking, Department } from './scanners.js';

/** One repair of its kind: what the event takes away is closed, those on their way in stay, the rest is rearranged. */
export function repair(problem: MendProblem, rules: RepairRules, nodeBudget: number): Repair {
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

const at = (b: Booking, department: Department) =>
  `${scannerName(b.scannerId, department)}, ${b.date} ${clock(b.startMin)}`;
