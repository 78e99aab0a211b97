import { TimeHeap } from './time-heap.js';

/** Somebody who comes to be served. Minutes on the day's clock. */
export interface Visit {
  /** When there and ready. */
  readonly readyMin: number;
  /** Number of the scanner, or -1: any that can take it. */
  readonly scanner: number;
  /** Bit per scanner that can take it. */
  readonly able: number;
  /** Who waits is taken in this order, lowest first. */
  readonly order: number;
  /** Number of the team that must be there throughout; -1: none. */
  readonly team: number;
  /** Staff it takes: 1, or 0 for a standstill. */
  readonly staff: number;
}

export interface DayRules {
  readonly scanners: number;
  /** Per scanner: stretches in which nothing is started, in order; what runs may run into them. */
  readonly closed: readonly (readonly (readonly [number, number])[])[];
  /** How many of each team there are. */
  readonly teams: readonly number[];
  /** How many exams can run at once; staff. */
  readonly atOnce: number;
  /** Nothing is started on a scanner from this minute on. */
  readonly lastStartMin: readonly number[];
}

/** When each visit started and ended and where; -1 for a visit that was sent home. */
export interface Served {
  readonly startMin: Float64Array;
  readonly endMin: Float64Array;
  readonly scanner: Int8Array;
}

/**
 * One day, event by event: whoever is ready and first in order is taken by a scanner that is free, as long as team and
 * staff are there. Never idle with somebody waiting who could be served (work-conserving), first come within an order.
 *
 * @param serve minutes a visit takes when it starts at this minute on this scanner; called once per visit, in order of time
 */
export function serveDay(
  visits: readonly Visit[],
  rules: DayRules,
  serve: (visit: number, scanner: number, startMin: number) => number,
): Served {
  const count = visits.length;
  const served: Served = {
    startMin: new Float64Array(count).fill(-1),
    endMin: new Float64Array(count).fill(-1),
    scanner: new Int8Array(count).fill(-1),
  };
  const arrivals = new TimeHeap(count);
  for (let v = 0; v < count; v++) arrivals.push(visits[v]!.readyMin, v);
  const ends = new TimeHeap(rules.scanners + 1);
  const reopenings = new TimeHeap(8);
  rules.closed.forEach((stretches, s) => {
    for (const [, to] of stretches) reopenings.push(to, s);
  });
  const running = new Int32Array(rules.scanners).fill(-1);
  const teamsFree = [...rules.teams];
  let staffFree = rules.atOnce;
  const waiting: number[] = [];
  const nextClosed = new Int32Array(rules.scanners);

  for (;;) {
    const now = Math.min(arrivals.nextMin, ends.nextMin, reopenings.nextMin);
    if (now === Infinity) break;
    while (ends.nextMin <= now) {
      const s = ends.pop();
      const { team, staff } = visits[running[s]!]!;
      if (team >= 0) teamsFree[team]! += 1;
      staffFree += staff;
      running[s] = -1;
    }
    while (arrivals.nextMin <= now) waiting.push(arrivals.pop());
    while (reopenings.nextMin <= now) reopenings.pop();
    for (let s = 0; s < rules.scanners && waiting.length > 0; s++) {
      if (running[s]! >= 0 || now >= rules.lastStartMin[s]! || isClosed(s, now)) continue;
      const at = firstFor(s);
      if (at < 0) continue;
      const v = waiting[at]!;
      waiting[at] = waiting[waiting.length - 1]!;
      waiting.pop();
      const { team, staff } = visits[v]!;
      if (team >= 0) teamsFree[team]! -= 1;
      staffFree -= staff;
      running[s] = v;
      const endMin = now + serve(v, s, now);
      served.startMin[v] = now;
      served.endMin[v] = endMin;
      served.scanner[v] = s;
      ends.push(endMin, s);
    }
  }
  return served;

  /** Place among those waiting of the one this scanner takes next; -1: nobody. */
  function firstFor(s: number): number {
    let best = -1;
    for (let i = 0; i < waiting.length; i++) {
      const v = waiting[i]!;
      const visit = visits[v]!;
      if (visit.scanner >= 0 ? visit.scanner !== s : ((visit.able >> s) & 1) === 0) continue;
      if (visit.staff > staffFree) continue;
      if (visit.team >= 0 && teamsFree[visit.team]! <= 0) continue;
      if (best < 0) best = i;
      else {
        const other = visits[waiting[best]!]!;
        const sooner =
          visit.order - other.order ||
          visit.readyMin - other.readyMin ||
          waiting[i]! - waiting[best]!;
        if (sooner < 0) best = i;
      }
    }
    return best;
  }

  function isClosed(s: number, minute: number): boolean {
    const stretches = rules.closed[s] ?? [];
    while (nextClosed[s]! < stretches.length && stretches[nextClosed[s]!]![1] <= minute)
      nextClosed[s]! += 1;
    const next = stretches[nextClosed[s]!];
    return next !== undefined && next[0] <= minute;
  }
}
