import { describe, expect, it } from 'vitest';
import { mend, type Booking, type MendProblem } from '../../src/day/index.js';
import { after, generatedEvent, repairFaults, struck } from './events.js';

/**
 * Fewest others that must move so that those the event displaced get a place: every subset by size, every place of each,
 * at most `most`; undefined when none is enough.
 */
function fewestByTryingAll(
  problem: MendProblem,
  displaced: readonly string[],
  most: number,
): number | undefined {
  const { visits, department, movableFrom, event } = problem;
  const requestOf = (id: string) =>
    visits.find((v) => v.requestId === id)?.request ??
    (event.kind === 'emergency' ? event.request : undefined)!;
  const held = (id: string) =>
    visits.some(
      (v) =>
        v.requestId === id &&
        !(v.startMin < movableFrom.minute && v.date === movableFrom.date) &&
        problem.onTheWay?.has(id) !== true,
    );
  const subject = event.kind === 'overrun' ? event.requestId : '';
  const movable = visits
    .map((v) => v.requestId)
    .filter((id) => held(id) && !displaced.includes(id) && id !== subject);
  const placesOf = (id: string): (Booking & { team?: string })[] => {
    const request = requestOf(id);
    const home = visits.find((v) => v.requestId === id);
    const late = event.kind === 'late' && event.requestId === id;
    const least = late
      ? home!.startMin + event.minutes
      : home === undefined
        ? problem.now.minute
        : movableFrom.minute;
    const now = home && request.offers.get(home.scannerId)?.find((o) => o.slotMin === home.slotMin);
    return department.scanners.flatMap((scanner) => {
      const offers = request.offers.get(scanner.id) ?? [];
      const kept =
        home === undefined
          ? [...offers].sort(
              (a, b) =>
                b.diagnostic - a.diagnostic || b.targeted - a.targeted || a.slotMin - b.slotMin,
            )[0]
          : scanner.id === home.scannerId
            ? now
            : offers.find(
                (o) =>
                  o.diagnostic >= now!.diagnostic &&
                  o.targeted >= now!.targeted &&
                  o.screening >= now!.screening,
              );
      if (kept === undefined) return [];
      const list: (Booking & { team?: string })[] = [];
      for (let startMin = 5 * Math.ceil(Math.max(0, least) / 5); startMin < 1440; startMin += 5) {
        const p = {
          requestId: id,
          scannerId: scanner.id,
          date: department.days[0]!,
          startMin,
          slotMin: kept.slotMin,
          ...(request.team === undefined ? {} : { team: request.team }),
        };
        const to = startMin + kept.slotMin;
        if (!scanner.hours.some((h) => startMin >= h.fromMin && to <= h.toMin)) continue;
        if (scanner.breaks.some((b) => startMin < b.toMin && b.fromMin < to)) continue;
        const { partOfDay } = request.canCome;
        if (partOfDay === 'morning' && startMin >= 720) continue;
        if (partOfDay === 'afternoon' && startMin < 720) continue;
        if (!struck(problem, p)) list.push(p);
      }
      return list;
    });
  };
  const clash = (a: Booking & { team?: string }, b: Booking & { team?: string }) =>
    a.startMin < b.startMin + b.slotMin &&
    b.startMin < a.startMin + a.slotMin &&
    (a.scannerId === b.scannerId || (a.team !== undefined && a.team === b.team));
  const standing = visits
    .filter((v) => !displaced.includes(v.requestId))
    .map((v) =>
      v.requestId === subject && event.kind === 'overrun'
        ? { ...v, slotMin: v.slotMin + event.minutes }
        : v,
    );
  const fits = (
    ids: readonly string[],
    there: readonly (Booking & { team?: string })[],
  ): boolean => {
    const [first, ...rest] = ids;
    if (first === undefined) return true;
    return placesOf(first).some(
      (p) => !there.some((o) => clash(o, p)) && fits(rest, [...there, p]),
    );
  };
  const subsets = (from: number, size: number): string[][] =>
    size === 0
      ? [[]]
      : movable
          .slice(from)
          .flatMap((id, i) => subsets(from + i + 1, size - 1).map((s) => [id, ...s]));
  for (let size = 0; size <= most; size++)
    for (const subset of subsets(0, size))
      if (
        fits(
          [...displaced, ...subset],
          standing.filter((v) => !subset.includes(v.requestId)),
        )
      )
        return size;
  return undefined;
}

describe('mending a day', () => {
  // Source: holds for any right planner.
  it('500 events on full days: every repair keeps every rule and moves nobody on the way in', () => {
    const seen = new Map<string, number>();
    let moved = 0;
    let proved = 0;
    let all = 0;
    for (let seed = 0; all < 500; seed++) {
      const problem = generatedEvent(seed, {
        scanners: 2 + (seed % 3),
        days: 1 + (seed % 2),
        requests: 50,
        teams: 0.08,
      });
      if (problem === undefined) continue;
      all++;
      const before = JSON.stringify(problem.visits);
      const { proposals } = mend(problem);
      expect(JSON.stringify(problem.visits)).toBe(before);
      expect(proposals.length).toBeGreaterThan(0);
      for (const repair of proposals) {
        const faults = repairFaults(problem, repair);
        if (faults.length > 0)
          expect({ seed, event: problem.event, faults }).toEqual({
            seed,
            event: problem.event,
            faults: [],
          });
        for (const m of repair.moves)
          if (m.answers === '' || m.because === '')
            throw new Error(`seed ${seed}: unexplained move`);
        // Nobody disappears: placed, without a place, or stuck and named.
        const named = new Set(
          [...after(problem, repair), ...repair.withoutPlace, ...repair.stuck].map(
            (p) => p.requestId,
          ),
        );
        for (const v of problem.visits)
          if (!named.has(v.requestId)) throw new Error(`seed ${seed}: ${v.requestId} is lost`);
      }
      seen.set(problem.event.kind, (seen.get(problem.event.kind) ?? 0) + 1);
      moved += proposals[0]!.peopleMoved;
      if (proposals[0]!.fewest) proved++;
    }
    expect(seen.size).toBe(7);
    expect(moved).toBeGreaterThan(300);
    expect(proved).toBeGreaterThan(250);
  });

  // Source: exhaustive search over subsets of people by size and every place of each.
  it('moves as few people as the optimum on small days', () => {
    let compared = 0;
    let pushes = 0;
    for (let seed = 1000; seed < 1400; seed++) {
      const problem = generatedEvent(seed, {
        scanners: 1 + (seed % 2),
        days: 1,
        requests: 9,
        hours: [480, 600],
        offers: 2,
      });
      if (problem === undefined || problem.event.kind === 'no-show') continue;
      const { proposals } = mend(problem, { nodeBudget: 40_000 });
      const repair = proposals[0]!;
      if (repair.stuck.length > 0 || repair.waitOnSite.length > 0) continue;
      // Those the event itself displaces: struck by it, or in the way of the overrun, the late or the emergency.
      const { event } = problem;
      const overran =
        event.kind === 'overrun'
          ? problem.visits.find((v) => v.requestId === event.requestId)!
          : undefined;
      const displaced = [
        ...(event.kind === 'emergency' ? ['E'] : []),
        ...problem.visits
          .filter(
            (v) =>
              struck(problem, v) ||
              (event.kind === 'late' && v.requestId === event.requestId) ||
              (overran !== undefined &&
                v !== overran &&
                v.scannerId === overran.scannerId &&
                v.startMin >= overran.startMin &&
                v.startMin <
                  overran.startMin +
                    overran.slotMin +
                    (event.kind === 'overrun' ? event.minutes : 0)),
          )
          .map((v) => v.requestId),
      ];
      const expected = fewestByTryingAll(problem, displaced, 3);
      const others = repair.moves.filter((m) => !displaced.includes(m.requestId)).length;
      if (expected === undefined) {
        if (repair.withoutPlace.length === 0) expect(others).toBeGreaterThan(3);
        continue;
      }
      expect({ seed, without: repair.withoutPlace.length, others }).toEqual({
        seed,
        without: 0,
        others: expected,
      });
      compared++;
      if (expected > 0) pushes++;
    }
    expect(compared).toBeGreaterThan(60);
    expect(pushes).toBeGreaterThan(10);
  });
});
