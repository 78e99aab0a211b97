import {
  compareFills,
  type Booking,
  type FillObjective,
  type FillProblem,
  type Offer,
} from '../../src/day/index.js';

const worthOf = { routine: 1, urgent: 2, asap: 4, stat: 8 };

/** Best of every scanner, day, five-minute start and offer of every request; for toy sizes only. Written from the rules alone. */
export function bestFillByTryingAll(problem: FillProblem): FillObjective {
  const { days, scanners } = problem.department;
  const choices = problem.waiting.map((r) =>
    days.flatMap((date, day) =>
      scanners.flatMap((s) =>
        (r.offers.get(s.id) ?? []).flatMap((offer) => {
          const list: { place: Booking; offer: Offer; day: number; late: boolean }[] = [];
          const late = r.dueDate !== undefined && date > r.dueDate;
          if (late && (r.priority === 'stat' || r.priority === 'asap')) return list;
          if (r.canCome.from !== undefined && date < r.canCome.from) return list;
          if (r.canCome.until !== undefined && date > r.canCome.until) return list;
          for (let startMin = 0; startMin < 1440; startMin += 5) {
            const to = startMin + offer.slotMin;
            if (r.canCome.partOfDay === 'morning' && startMin >= 720) continue;
            if (r.canCome.partOfDay === 'afternoon' && startMin < 720) continue;
            if (!s.hours.some((h) => startMin >= h.fromMin && to <= h.toMin)) continue;
            if (s.breaks.some((b) => startMin < b.toMin && b.fromMin < to)) continue;
            const place = {
              requestId: r.id,
              scannerId: s.id,
              date,
              startMin,
              slotMin: offer.slotMin,
            };
            if (problem.taken.some((t) => meets(t, place))) continue;
            list.push({ place, offer, day, late });
          }
          return list;
        }),
      ),
    ),
  );
  const placed: (typeof choices)[number] = [];
  let best: FillObjective | undefined;
  const descend = (r: number): void => {
    if (r === choices.length) {
      const now = objectiveOf(problem, placed);
      if (best === undefined || compareFills(now, best) > 0) best = now;
      return;
    }
    descend(r + 1);
    for (const c of choices[r]!) {
      if (placed.some((p) => meets(p.place, c.place))) continue;
      placed.push(c);
      descend(r + 1);
      placed.pop();
    }
  };
  descend(0);
  return best!;
}

const meets = (a: Booking, b: Booking) =>
  a.scannerId === b.scannerId &&
  a.date === b.date &&
  a.startMin < b.startMin + b.slotMin &&
  b.startMin < a.startMin + a.slotMin;

function objectiveOf(
  problem: FillProblem,
  placed: readonly { place: Booking; offer: Offer; day: number; late: boolean }[],
): FillObjective {
  const request = (id: string) => problem.waiting.find((r) => r.id === id)!;
  let diagnostic = 0;
  let targeted = 0;
  let screening = 0;
  let overrunPercent = 0;
  let waiting = 0;
  for (const { place, offer, day, late } of placed) {
    const worth = worthOf[request(place.requestId).priority];
    diagnostic += worth * (late ? 1 : 2) * offer.diagnostic;
    targeted += worth * (late ? 1 : 2) * offer.targeted;
    screening += worth * (late ? 1 : 2) * offer.screening;
    overrunPercent += Math.round(100 * (1 - offer.chance));
    waiting += worth * (288 * day + place.startMin / 5);
  }
  let coilChanges = 0;
  const all = [
    ...problem.taken,
    ...placed.map(({ place }) => ({ ...place, coil: request(place.requestId).coil })),
  ].sort((a, b) => a.startMin - b.startMin);
  for (const scanner of problem.department.scanners)
    for (const date of problem.department.days) {
      const day = all.filter((p) => p.scannerId === scanner.id && p.date === date);
      day.forEach((p, i) => {
        if (i > 0 && p.coil !== day[i - 1]!.coil) coilChanges++;
      });
    }
  return { diagnostic, targeted, screening, overrunPercent, coilChanges, waiting };
}
