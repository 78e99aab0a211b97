import { visitBreaks } from './fill-check.js';
import { priorityWorth, stepMin, type WaitingRequest } from './fill-problem.js';
import type { MendGrid } from './mend-grid.js';
import type { Repair } from './mend-problem.js';
import type { Offer } from './offers.js';
import type { Booking, Department } from './scanners.js';

/** Somebody who may be moved, or must be placed. */
export interface Mover {
  readonly request: WaitingRequest;
  /** Place before the event; none for an emergency. */
  readonly home?: Booking;
  /** Start that a shift is counted from: home, or where a late patient or an emergency could begin first. */
  readonly aim: { readonly date: string; readonly minute: number };
  /** No start before this. */
  readonly earliest: { readonly date: string; readonly minute: number };
  /** Another day would be no answer (late patient, emergency without due date). */
  readonly sameDay: boolean;
}

export interface Replaced {
  readonly mover: number;
  readonly to: Booking;
  readonly shiftMin: number;
  /** Mover whose new place pushed this one out. */
  readonly pushedBy?: number;
}

export interface Rearranged {
  readonly replaced: readonly Replaced[];
  readonly dropped: readonly number[];
  readonly fewest: boolean;
  readonly nodes: number;
}

/** What a repair may do. */
export type RepairRules = Pick<Repair, 'shorterSlots' | 'shiftLimitMin'>;

interface Place {
  readonly to: Booking;
  readonly shiftMin: number;
}

interface Pending {
  readonly mover: number;
  readonly pushedBy?: number;
}

/**
 * Least disturbing places for those who lost theirs: first fewest people without a place, then fewest moved, then least
 * shift, a minute of somebody urgent counting more. Iterative deepening (Korf 1985) over both counts, with branch and bound on the shift; a level that the node budget
 * cuts short takes the proof with it, not the answer.
 */
export function rearrange(
  department: Department,
  movers: readonly Mover[],
  displaced: readonly number[],
  grid: MendGrid,
  { shorterSlots, shiftLimitMin = Infinity }: RepairRules,
  nodeBudget: number,
): Rearranged {
  const places = new Map<number, readonly Place[]>();
  const placesOf = (m: number): readonly Place[] => {
    let found = places.get(m);
    if (found === undefined)
      places.set(
        m,
        (found = placesFor(department, movers[m]!, shorterSlots).filter(
          (p) => p.shiftMin <= shiftLimitMin,
        )),
      );
    return found;
  };
  let nodes = 0;
  let cut = false;
  let levelEnd = 0;
  const levelBudget = Math.max(200, Math.floor(nodeBudget / 8));

  const level = (
    drops: number,
    pushes: number,
  ): { replaced: Replaced[]; dropped: number[] } | undefined => {
    let best: { replaced: Replaced[]; dropped: number[] } | undefined;
    let bestCost = Infinity;
    const replaced: Replaced[] = [];
    const dropped: number[] = [];
    const settled = new Set<number>();
    const costOfDrop = (m: number) => 1e7 * priorityWorth[movers[m]!.request.priority];

    const descend = (
      pending: readonly Pending[],
      canDrop: number,
      canPush: number,
      cost: number,
    ) => {
      if (cost >= bestCost) return;
      if (++nodes > levelEnd) {
        cut = true;
        return;
      }
      const next = pending[0];
      if (next === undefined) {
        best = { replaced: [...replaced], dropped: [...dropped] };
        bestCost = cost;
        return;
      }
      const rest = pending.slice(1);
      const { team, priority } = movers[next.mover]!.request;
      const weight = priorityWorth[priority];
      settled.add(next.mover);
      const choices: { place: Place; met: readonly number[] }[] = [];
      for (const place of placesOf(next.mover)) {
        if (cost + weight * place.shiftMin >= bestCost) break;
        const met = grid.inTheWay(place.to, team, canPush);
        if (met === undefined || met.some((m) => settled.has(m))) continue;
        choices.push({ place, met });
      }
      choices.sort((a, b) => a.met.length - b.met.length);
      for (const { place, met } of choices) {
        for (const m of met) grid.mark(movers[m]!.home!, movers[m]!.request.team, -1);
        grid.mark(place.to, team, next.mover);
        replaced.push({ ...next, to: place.to, shiftMin: place.shiftMin });
        descend(
          [...rest, ...met.map((mover) => ({ mover, pushedBy: next.mover }))],
          canDrop,
          canPush - met.length,
          cost + weight * place.shiftMin,
        );
        replaced.pop();
        grid.mark(place.to, team, -1);
        for (const m of met) grid.mark(movers[m]!.home!, movers[m]!.request.team, m);
        if (nodes > levelEnd) break;
      }
      if (canDrop > 0) {
        dropped.push(next.mover);
        descend(rest, canDrop - 1, canPush, cost + costOfDrop(next.mover));
        dropped.pop();
      }
      settled.delete(next.mover);
    };
    levelEnd = nodes + levelBudget;
    descend(
      [...displaced]
        .sort(
          (a, b) =>
            priorityWorth[movers[b]!.request.priority] - priorityWorth[movers[a]!.request.priority],
        )
        .map((mover) => ({ mover })),
      drops,
      pushes,
      0,
    );
    return best;
  };

  for (let drops = 0; drops <= displaced.length; drops++) {
    const mostPushes = drops === 0 ? 8 : 3;
    for (let pushes = 0; pushes <= mostPushes; pushes++) {
      // Dropping everybody needs no search; a worse count of people is only looked at within the budget.
      if (nodes > nodeBudget && drops < displaced.length) {
        cut = true;
        break;
      }
      // Fewer were proved impossible by the levels before; a cut in this one leaves only the shifts unproved.
      const proved = !cut;
      const found = level(drops, pushes);
      if (found !== undefined) return { ...found, fewest: proved, nodes };
    }
    // More pushes than were looked at might still have saved this person.
    if (movers.length - displaced.length > mostPushes) cut = true;
  }
  return { replaced: [], dropped: [...displaced], fewest: false, nodes };
}

/** Every place a mover could take, least shift first, whoever stands there now. */
function placesFor(department: Department, mover: Mover, shorterSlots: boolean): readonly Place[] {
  const { request, aim, earliest } = mover;
  const aimDay = department.days.indexOf(aim.date);
  const places: Place[] = [];
  department.days.forEach((date, day) => {
    if (date < earliest.date || (mover.sameDay && date !== aim.date)) return;
    for (const scanner of department.scanners) {
      const lengths = slotsFor(mover, scanner.id, shorterSlots);
      if (lengths.length === 0) continue;
      const opens = Math.min(...scanner.hours.map((h) => h.fromMin));
      const closes = Math.max(...scanner.hours.map((h) => h.toMin));
      const first = Math.max(opens, date === earliest.date ? earliest.minute : 0);
      for (
        let startMin = Math.ceil(first / stepMin) * stepMin;
        startMin < closes;
        startMin += stepMin
      ) {
        if (visitBreaks(request, date, startMin).length > 0) continue;
        const shiftMin = 1440 * Math.abs(day - aimDay) + Math.abs(startMin - aim.minute);
        for (const slotMin of lengths)
          places.push({
            to: { requestId: request.id, scannerId: scanner.id, date, startMin, slotMin },
            shiftMin,
          });
      }
    }
  });
  // Of equal shifts the own scanner first, then the longer slot.
  const own = (p: Place) => (p.to.scannerId === mover.home?.scannerId ? 0 : 1);
  return places.sort(
    (a, b) => a.shiftMin - b.shiftMin || own(a) - own(b) || b.to.slotMin - a.to.slotMin,
  );
}

/** Slot lengths on a scanner: those that keep every answer, the shortest of them; with `shorterSlots` every one. */
function slotsFor({ request, home }: Mover, scannerId: string, shorterSlots: boolean): number[] {
  const offers = request.offers.get(scannerId) ?? [];
  if (home === undefined) {
    const best = offers.reduce<Offer | undefined>(
      (a, b) => (a === undefined || betterAnswers(b, a) ? b : a),
      undefined,
    );
    return shorterSlots ? offers.map((o) => o.slotMin) : best === undefined ? [] : [best.slotMin];
  }
  const now = offerAt(request, home);
  const lengths = new Set<number>();
  if (scannerId === home.scannerId) lengths.add(home.slotMin);
  else {
    const kept = offers.find(
      (o) =>
        now !== undefined &&
        o.diagnostic >= now.diagnostic &&
        o.targeted >= now.targeted &&
        o.screening >= now.screening,
    );
    if (kept !== undefined) lengths.add(kept.slotMin);
  }
  if (shorterSlots) for (const o of offers) if (o.slotMin <= home.slotMin) lengths.add(o.slotMin);
  return [...lengths];
}

const betterAnswers = (a: Offer, b: Offer): boolean =>
  (a.diagnostic - b.diagnostic || a.targeted - b.targeted || a.screening - b.screening) > 0;

/** The offer a booking stands on: the longest that its slot holds. */
export function offerAt(request: WaitingRequest, place: Booking): Offer | undefined {
  return request.offers.get(place.scannerId)?.findLast((o) => o.slotMin <= place.slotMin);
}
