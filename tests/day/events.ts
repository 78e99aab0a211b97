import {
  fillAll,
  mend,
  visitBreaks,
  type BookedVisit,
  type Booking,
  type DayEvent,
  type MendProblem,
  type Repair,
} from '../../src/day/index.js';
import { stream } from '../planning/instances.js';
import { inventedDepartment, type DepartmentSize } from './departments.js';

/** A day filled from a crowd of requests, and an event that befalls it. */
export function generatedEvent(seed: number, size: DepartmentSize): MendProblem | undefined {
  const random = stream('event', seed);
  const whole = (low: number, high: number) => low + Math.floor(random() * (high - low + 1));
  const day = inventedDepartment(20_000 + seed, size);
  const { placements } = fillAll(day, {
    random: stream('full day', seed),
    iterations: 15,
    boundRounds: 1,
    exactNodes: 0,
    reportEvery: 1000,
  });
  if (placements.length === 0) return undefined;
  const visits = placements.map((p): BookedVisit => {
    const request = day.waiting.find((r) => r.id === p.requestId)!;
    const { requestId, scannerId, date, startMin, slotMin } = p;
    return {
      ...{ requestId, scannerId, date, startMin, slotMin, request, coil: request.coil },
      ...(request.team === undefined ? {} : { team: request.team }),
    };
  });
  const date = day.department.days[0]!;
  const today = visits.filter((v) => v.date === date);
  if (today.length === 0) return undefined;
  const one = today[whole(0, today.length - 1)]!;
  const kinds = [
    'scanner down',
    'staff gone',
    'team gone',
    'late',
    'overrun',
    'emergency',
    'no-show',
  ] as const;
  const kind = kinds[whole(0, kinds.length - 1)]!;
  const minute =
    kind === 'late' || kind === 'overrun'
      ? one.startMin
      : 5 * Math.floor((one.startMin - whole(0, 60)) / 5);
  const minutes = 5 * whole(1, 9);
  const emergency = inventedDepartment(30_000 + seed, {
    ...size,
    requests: 30,
    taken: 0,
  }).waiting.find((r) => r.priority === 'stat' || r.priority === 'asap');
  const still = day.waiting.filter((r) => !placements.some((p) => p.requestId === r.id));
  let event: DayEvent;
  if (kind === 'late' || kind === 'overrun') event = { kind, requestId: one.requestId, minutes };
  else if (kind === 'no-show') event = { kind, requestId: one.requestId };
  else if (kind === 'emergency') {
    if (emergency === undefined) return undefined;
    const { dueDate: _, ...rest } = emergency;
    event = { kind, request: { ...rest, id: 'E', canCome: { partOfDay: 'any' } } };
  } else {
    const stretch = { date, fromMin: one.startMin, toMin: one.startMin + 30 * whole(1, 8) };
    event =
      kind === 'team gone'
        ? { kind, team: 'anaesthesia', ...stretch }
        : { kind, scannerId: one.scannerId, ...stretch };
  }
  return {
    department: day.department,
    visits,
    event,
    now: { date, minute },
    movableFrom: { date, minute: minute + 5 * whole(0, 6) },
    onTheWay: new Set(today.filter(() => random() < 0.05).map((v) => v.requestId)),
    waiting: still,
  };
}

/** Where everybody stands after a repair; those stuck are left out, they are no longer the plan's. */
export function after(problem: MendProblem, repair: Repair): (Booking & { team?: string })[] {
  const gone = new Set([...repair.stuck, ...repair.withoutPlace].map((p) => p.requestId));
  const changed = new Map(
    [...repair.moves, ...repair.waitOnSite].map((m) => [m.requestId, m.to] as const),
  );
  const standing = problem.visits.flatMap((v) => {
    if (gone.has(v.requestId)) return [];
    const place = changed.get(v.requestId) ?? v;
    const { event } = problem;
    const extra = event.kind === 'overrun' && event.requestId === v.requestId ? event.minutes : 0;
    return [
      {
        requestId: v.requestId,
        scannerId: place.scannerId,
        date: place.date,
        startMin: place.startMin,
        slotMin: place.slotMin + extra,
        ...(v.team === undefined ? {} : { team: v.team }),
      },
    ];
  });
  const emergency = problem.event.kind === 'emergency' ? problem.event.request : undefined;
  const place = emergency === undefined ? undefined : changed.get(emergency.id);
  return place === undefined
    ? standing
    : [
        ...standing,
        { ...place, ...(emergency?.team === undefined ? {} : { team: emergency.team }) },
      ];
}

const meets = (a: Booking, b: Booking) =>
  a.date === b.date && a.startMin < b.startMin + b.slotMin && b.startMin < a.startMin + a.slotMin;

/** Whether the event itself forbids a place. */
export function struck({ event }: MendProblem, p: Booking & { team?: string }): boolean {
  if (event.kind === 'scanner down' || event.kind === 'staff gone' || event.kind === 'team gone') {
    const hit =
      p.date === event.date && p.startMin < event.toMin && event.fromMin < p.startMin + p.slotMin;
    return (
      hit && (event.kind === 'team gone' ? p.team === event.team : p.scannerId === event.scannerId)
    );
  }
  return false;
}

/** Everything a repair could get wrong, read off the outcome. */
export function repairFaults(problem: MendProblem, repair: Repair): string[] {
  const faults: string[] = [];
  const { event, department, movableFrom, now } = problem;
  const moved = new Map(repair.moves.map((m) => [m.requestId, m.to]));
  const subject = 'requestId' in event ? event.requestId : undefined;
  for (const v of problem.visits) {
    const onTheWay =
      v.date < movableFrom.date ||
      (v.date === movableFrom.date && v.startMin < movableFrom.minute) ||
      problem.onTheWay?.has(v.requestId) === true;
    const late = event.kind === 'late' && v.requestId === subject;
    if (onTheWay && !late) {
      if (moved.has(v.requestId)) faults.push(`${v.requestId} is on the way in and moved`);
      if (repair.withoutPlace.some((w) => w.requestId === v.requestId))
        faults.push(`${v.requestId} is on the way in and dropped`);
    }
  }
  const places = after(problem, repair);
  const untouched = (id: string) => !moved.has(id);
  for (const p of places) {
    const say = (what: string) =>
      faults.push(`${p.requestId} ${p.scannerId} ${p.date} ${p.startMin}+${p.slotMin}: ${what}`);
    const scanner = department.scanners.find((s) => s.id === p.scannerId)!;
    const overran = event.kind === 'overrun' && p.requestId === subject;
    const to = p.startMin + p.slotMin;
    if (!overran) {
      if (!scanner.hours.some((h) => p.startMin >= h.fromMin && to <= h.toMin)) say('closed');
      if (scanner.breaks.some((b) => p.startMin < b.toMin && b.fromMin < to)) say('break');
    }
    if (struck(problem, p)) say('struck by the event');
    for (const o of places) {
      if (o === p || !meets(o, p)) continue;
      if (o.scannerId === p.scannerId) say(`overlaps ${o.requestId}`);
      if (p.team !== undefined && p.team === o.team) say(`team is with ${o.requestId}`);
    }
    if (untouched(p.requestId)) continue;
    const request =
      problem.visits.find((v) => v.requestId === p.requestId)?.request ??
      (event.kind === 'emergency' ? event.request : undefined)!;
    if (!request.offers.get(p.scannerId)?.some((o) => o.slotMin === p.slotMin)) say('not offered');
    for (const why of visitBreaks(request, p.date, p.startMin)) say(why);
    const least =
      event.kind === 'emergency' && p.requestId === event.request.id
        ? now.minute
        : event.kind === 'late' && p.requestId === subject
          ? problem.visits.find((v) => v.requestId === subject)!.startMin + event.minutes
          : movableFrom.minute;
    if (p.date === movableFrom.date && p.startMin < least) say('sooner than it could begin');
  }
  return faults;
}

export { mend };
