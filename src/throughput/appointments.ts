import type { Patient } from './patients.js';
import type { SimDepartment } from './sim-department.js';

/** A booked time, minutes of the day. */
export interface Appointment {
  readonly patient: Patient;
  readonly scanner: number;
  readonly startMin: number;
  readonly slotMin: number;
}

interface Stretch {
  readonly scanner: number;
  /** Which stretch of the scanner's day. */
  readonly number: number;
  readonly from: number;
  readonly to: number;
  used: number;
  readonly booked: { patient: Patient; slotMin: number }[];
}

/**
 * The day's book: the list is gone through in order, urgent first, and each is given to the scanner that needs the shortest
 * slot for them and has room; whoever fits nowhere stays on the list, in place. Full scanners then get the overbooked ones.
 *
 * @param list who waits, oldest first; those booked are taken out of it
 */
export function bookDay(list: Patient[], department: SimDepartment): readonly Appointment[] {
  const { scanners, kinds, bufferMin } = department;
  const stretches = scanners.flatMap(({ open }, scanner) =>
    open.map(([from, to], number): Stretch => ({ scanner, number, from, to, used: 0, booked: [] })),
  );
  const shortest = shortestSlot(department);
  const left: Patient[] = [];
  let room = Infinity;
  for (const urgent of [true, false]) {
    for (const patient of list) {
      if (kinds[patient.kind]!.urgent !== urgent) continue;
      if (room < shortest || !book(patient)) left.push(patient);
    }
  }
  overbook();
  restore(list, left);
  return stretches.flatMap((s) => timesOf(s));

  function book(patient: Patient): boolean {
    const { places } = kinds[patient.kind]!;
    let best: Stretch | undefined;
    let bestSlot = Infinity;
    for (const stretch of stretches) {
      const slot = places[stretch.scanner]?.slotMin;
      if (slot === undefined || slot > bestSlot) continue;
      if (stretch.from + stretch.used + slot > stretch.to) continue;
      const emptier = best === undefined || slot < bestSlot || freeOf(stretch) > freeOf(best);
      if (!emptier) continue;
      best = stretch;
      bestSlot = slot;
    }
    if (best === undefined) return false;
    best.booked.push({ patient, slotMin: bestSlot });
    best.used += bestSlot + bufferMin;
    room = 0;
    for (const stretch of stretches) room = Math.max(room, freeOf(stretch));
    return true;
  }

  function overbook(): void {
    if (department.overbooked <= 0) return;
    for (let scanner = 0; scanner < scanners.length; scanner++) {
      const own = stretches.filter((s) => s.scanner === scanner && s.booked.length > 0);
      for (let n = 0; n < department.overbooked && own.length > 0; n++) {
        const next = left.findIndex((p) => kinds[p.kind]!.places[scanner] !== undefined);
        if (next < 0) break;
        const [patient] = left.splice(next, 1);
        own[n % own.length]!.booked.push({ patient: patient!, slotMin: 0 });
      }
    }
  }

  function timesOf({
    scanner,
    from,
    booked,
    number: stretchNumber,
  }: Stretch): readonly Appointment[] {
    const full = booked.filter((b) => b.slotMin > 0);
    if (department.groupByCoil) {
      // Every other stretch the other way round: it begins with the coil that the one before ended with.
      const way = stretchNumber % 2 === 0 ? 1 : -1;
      full.sort((a, b) => way * (kinds[a.patient.kind]!.coil - kinds[b.patient.kind]!.coil));
    }
    let at = from;
    const times = full.map(({ patient, slotMin }): Appointment => {
      const startMin = at;
      at += slotMin + bufferMin;
      return { patient, scanner, startMin, slotMin };
    });
    // Those on top come to the times of others, spread over the stretch.
    const extra = booked.filter((b) => b.slotMin === 0);
    const shared = extra.map(({ patient }, n): Appointment => {
      const with_ = times[Math.floor(((n + 0.5) * times.length) / extra.length)]!;
      const slotMin = kinds[patient.kind]!.places[scanner]!.slotMin;
      return { patient, scanner, startMin: with_.startMin, slotMin };
    });
    return [...times, ...shared];
  }
}

const freeOf = (s: Stretch) => s.to - s.from - s.used;

/** The list as it was, without those who were booked. */
function restore(list: Patient[], left: readonly Patient[]): void {
  const staying = new Set(left);
  let kept = 0;
  for (const patient of list) if (staying.has(patient)) list[kept++] = patient;
  list.length = kept;
}

const shortestOf = new WeakMap<SimDepartment, number>();

function shortestSlot(department: SimDepartment): number {
  const known = shortestOf.get(department);
  if (known !== undefined) return known;
  const shortest = Math.min(
    ...department.kinds.flatMap((k) => k.places.map((p) => p?.slotMin ?? Infinity)),
  );
  shortestOf.set(department, shortest);
  return shortest;
}
