import { clock } from './conflicts.js';
import {
  dueBinds,
  noonStep,
  stepMin,
  type FillProblem,
  type WaitingRequest,
} from './fill-problem.js';
import type { Booking } from './scanners.js';

/**
 * Every hard rule, read off the finished placements and the problem alone; knows nothing of boards and stretches.
 * Empty: nothing is broken.
 */
export function brokenRules(problem: FillProblem, placed: readonly Booking[]): readonly string[] {
  const broken: string[] = [];
  const byId = new Map(problem.waiting.map((r) => [r.id, r]));
  const seen = new Set<string>();
  for (const p of placed) {
    const say = (what: string) =>
      broken.push(`${p.requestId} on ${p.scannerId}, ${p.date} ${clock(p.startMin)}: ${what}`);
    const request = byId.get(p.requestId);
    const scanner = problem.department.scanners.find((s) => s.id === p.scannerId);
    if (seen.has(p.requestId)) say('placed twice');
    seen.add(p.requestId);
    if (request === undefined || scanner === undefined) {
      say('unknown request or scanner');
      continue;
    }
    const to = p.startMin + p.slotMin;
    if (p.startMin % stepMin !== 0) say('off the five-minute grid');
    if (!problem.department.days.includes(p.date)) say('not a planned day');
    if (!scanner.hours.some((h) => p.startMin >= h.fromMin && to <= h.toMin)) say('closed');
    if (scanner.breaks.some((b) => p.startMin < b.toMin && b.fromMin < to)) say('in a break');
    const offers = request.offers.get(p.scannerId) ?? [];
    if (!offers.some((o) => o.slotMin === p.slotMin)) say('this scanner does not offer it');
    for (const why of visitBreaks(request, p.date, p.startMin)) say(why);
    for (const other of [...problem.taken, ...placed]) {
      if (other === p || other.date !== p.date) continue;
      const meets = p.startMin < other.startMin + other.slotMin && other.startMin < to;
      if (!meets) continue;
      if (other.scannerId === p.scannerId) say(`overlaps ${other.requestId}`);
      const team = 'team' in other ? other.team : byId.get(other.requestId)?.team;
      if (request.team !== undefined && team === request.team)
        say(`team ${request.team} is with ${other.requestId}`);
    }
  }
  return broken;
}

/** What speaks against a visit on this date at this time, as the patient and the due date go. */
export function visitBreaks(
  request: Pick<WaitingRequest, 'canCome' | 'dueDate' | 'priority'>,
  date: string,
  startMin: number,
): readonly string[] {
  const { canCome, dueDate } = request;
  const noonMin = noonStep * stepMin;
  return [
    ...(canCome.from !== undefined && date < canCome.from ? ['before the patient can come'] : []),
    ...(canCome.until !== undefined && date > canCome.until ? ['after the patient can come'] : []),
    ...(canCome.partOfDay === 'morning' && startMin >= noonMin ? ['mornings only'] : []),
    ...(canCome.partOfDay === 'afternoon' && startMin < noonMin ? ['afternoons only'] : []),
    ...(dueBinds(request) && dueDate !== undefined && date > dueDate
      ? [`${request.priority} after its due date`]
      : []),
  ];
}
