import type { Department, Scanner } from '../../src/day/index.js';
import type { FillProblem, TakenPlace, WaitingRequest } from '../../src/day/fill-problem.js';
import { undominated, type Offer } from '../../src/day/offers.js';
import { stream } from '../planning/instances.js';

export interface DepartmentSize {
  readonly scanners: number;
  readonly days: number;
  readonly requests: number;
  /** Bookings tried before the requests. */
  readonly taken?: number;
  readonly hours?: readonly [number, number];
  readonly offers?: number;
  /** Share of requests that need the one team. */
  readonly teams?: number;
}

const coils = ['head', 'spine', 'knee', 'body'];

/**
 * An invented department. Offers rise with the slot: a look first, then one question after the other at full grade, with a
 * chance to finish between 0.9 and 1; a 3 T scanner is often a step quicker; some scanners cannot take some requests.
 */
export function inventedDepartment(seed: number, size: DepartmentSize): FillProblem {
  const random = stream('department', seed);
  const whole = (low: number, high: number) => low + Math.floor(random() * (high - low + 1));
  const [open, close] = size.hours ?? [8 * 60, 17 * 60];
  const days = Array.from(
    { length: size.days },
    (_, d) => `2027-03-${String(d + 1).padStart(2, '0')}`,
  );
  const scanners = Array.from({ length: size.scanners }, (_, s): Scanner => {
    const breakAt = open + 5 * Math.round((close - open) / 10 + whole(-6, 6));
    return {
      id: `S${s}`,
      name: `Scanner ${s}`,
      fieldT: s % 2 === 0 ? 1.5 : 3,
      boreCm: 60,
      coils: coils.filter((_, c) => s === 0 || c !== s % 4),
      hours: [{ fromMin: open + 5 * whole(0, 3), toMin: close - 5 * whole(0, 3) }],
      breaks: close - open > 240 ? [{ fromMin: breakAt, toMin: breakAt + 30 }] : [],
    };
  });
  const department: Department = { name: 'Invented', zone: 'UTC', days, scanners };
  const taken: TakenPlace[] = [];
  for (let i = 0; i < (size.taken ?? 0); i++) {
    const scanner = scanners[whole(0, scanners.length - 1)]!;
    const place: TakenPlace = {
      requestId: `B${i}`,
      scannerId: scanner.id,
      date: days[whole(0, days.length - 1)]!,
      startMin: open + 5 * whole(0, (close - open) / 5),
      slotMin: 5 * whole(3, 9),
      coil: coils[whole(0, 3)]!,
      ...(random() < 0.2 && (size.teams ?? 0) > 0 ? { team: 'anaesthesia' } : {}),
    };
    const inside = scanner.hours.some(
      (h) => place.startMin >= h.fromMin && place.startMin + place.slotMin <= h.toMin,
    );
    const meets = [
      ...scanner.breaks,
      ...taken
        .filter(
          (t) =>
            t.date === place.date &&
            (t.scannerId === place.scannerId || (t.team !== undefined && t.team === place.team)),
        )
        .map((t) => ({ fromMin: t.startMin, toMin: t.startMin + t.slotMin })),
    ].some((t) => place.startMin < t.toMin && t.fromMin < place.startMin + place.slotMin);
    if (inside && !meets) taken.push(place);
  }
  const waiting = Array.from({ length: size.requests }, (_, r): WaitingRequest => {
    const coil = coils[whole(0, 3)]!;
    const first = whole(2, 5);
    const weights = Array.from({ length: whole(1, 3) }, () => whole(1, 9));
    const gains = weights.map(() => whole(1, 4));
    const offers = new Map<string, readonly Offer[]>();
    for (const scanner of scanners) {
      if (!scanner.coils.includes(coil) || random() < 0.05) continue;
      const slower = scanner.fieldT === 3 ? 0 : whole(0, 1);
      const total = weights.reduce((a, b) => a + b, 0);
      const list: Offer[] = [];
      let steps = first + slower;
      let diagnostic = 0;
      const offer = () =>
        list.push({
          slotMin: 5 * steps,
          diagnostic,
          targeted: Math.max(diagnostic, whole(0, total)),
          screening: total,
          chance: whole(90, 100) / 100,
          words: 'invented',
        });
      offer();
      weights.slice(0, (size.offers ?? 4) - 1).forEach((w, i) => {
        steps += gains[i]!;
        diagnostic += w;
        offer();
      });
      offers.set(scanner.id, undominated(list));
    }
    const roll = random();
    const from = random() < 0.3 ? days[whole(0, days.length - 1)] : undefined;
    const until = random() < 0.3 ? days[whole(0, days.length - 1)] : undefined;
    return {
      id: `R${r}`,
      priority: roll < 0.7 ? 'routine' : roll < 0.9 ? 'urgent' : roll < 0.97 ? 'asap' : 'stat',
      ...(random() < 0.5 ? { dueDate: days[whole(0, days.length - 1)]! } : {}),
      canCome: {
        ...(from === undefined ? {} : { from }),
        ...(until === undefined ? {} : { until }),
        partOfDay: random() < 0.7 ? 'any' : random() < 0.5 ? 'morning' : 'afternoon',
      },
      coil,
      ...(random() < (size.teams ?? 0) ? { team: 'anaesthesia' } : {}),
      offers,
    };
  });
  return { department, taken, waiting };
}
