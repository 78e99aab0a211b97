import { randomStream } from '../shared/index.js';
import { bookDay, type Appointment } from './appointments.js';
import { emptyRun, runExam } from './exam-run.js';
import { MonthCount, type MonthRecord } from './month-record.js';
import { drawAt, PatientSource, type Patient } from './patients.js';
import { serveDay, type DayRules, type Visit } from './serve-day.js';
import type { SimDepartment, SimScanner } from './sim-department.js';
import { exponential, lognormalFactor, normalQuantile, poisson } from './variates.js';

/** A booked patient's own order is the appointment; an emergency goes before them. */
const beforeAll = -1e6;

/** Somebody or something that takes a scanner today. */
interface Coming {
  readonly visit: Visit;
  readonly patient?: Patient;
  readonly appointment?: Appointment;
  /** A scanner that stands still this long. */
  readonly downMin?: number;
}

/**
 * One month of working days: requests come in, the book of each day is made the evening before, patients come or do not,
 * are served event by event with their own luck, and what is left below diagnostic comes back. Every source of chance
 * has its own stream, named by month, so that every policy meets the same patients and a scanner more shifts nobody's luck.
 *
 * @param month number of the month; months are independent of each other
 */
export function simulateMonth(department: SimDepartment, month: number): MonthRecord {
  const { seed, scanners, daysAMonth, requestsPerDay, listAtStart } = department;
  const stream = (name: string) => randomStream(seed, `month ${month}/${name}`);
  const booked = new PatientSource(seed, month, 'booked', department.kinds);
  const emergencies = new PatientSource(seed, month, 'emergency', department.kinds);
  const followUps = new PatientSource(seed, month, 'follow-up', department.kinds);
  const arrivals = stream('requests a day');
  const emergencyTimes = stream('emergency times');
  const standstills = scanners.map((s) => stream(`scanner ${s.id} down`));
  const count = new MonthCount();
  const rules = rulesOf(department);
  const list: Patient[] = [];
  const owed: { readonly day: number; readonly patient: Patient }[] = [];
  const run = emptyRun();
  const coils = new Int32Array(scanners.length);

  if (booked.any) {
    for (let i = 0; i < listAtStart; i++) {
      const ago = requestsPerDay > 0 ? (listAtStart - i) / requestsPerDay : 1;
      take(booked.next(-Math.ceil(ago)), false);
    }
  }
  for (let day = 0; day < daysAMonth; day++) {
    for (let i = owed.length - 1; i >= 0; i--) {
      if (owed[i]!.day > day) continue;
      list.push(owed[i]!.patient);
      owed.splice(i, 1);
    }
    const coming = bookDay(list, department).flatMap(attend);
    comeUnbooked(coming);
    serve(coming, day);
    const asked = booked.any ? poisson(arrivals(), requestsPerDay) : 0;
    for (let i = 0; i < asked; i++) take(booked.next(day), true);
    for (const { open } of scanners) for (const [from, to] of open) count.openMin += to - from;
  }
  return count.record(daysAMonth, Math.max(1, scanners.length), list.length + owed.length);

  /** Onto the list, unless no scanner can take it. */
  function take(patient: Patient, counted: boolean): void {
    const { places } = department.kinds[patient.kind]!;
    if (places.some((place) => place !== undefined)) list.push(patient);
    else if (counted) count.cannotTake += 1;
  }

  /** Who comes to an appointment, and when; who does not come asks again. */
  function attend(appointment: Appointment): Coming[] {
    const { patient, startMin, scanner } = appointment;
    const { draws, kind } = patient;
    if (draws[drawAt.noShow]! < department.noShowShare) {
      count.noShows += 1;
      if (patient.missed < mostMissed)
        list.push(followUps.again(patient, { missed: patient.missed + 1 }));
      return [];
    }
    const late = draws[drawAt.late]! < department.lateShare;
    const readyMin = late
      ? startMin + exponential(draws[drawAt.lateBy]!, department.lateMeanMin)
      : startMin - department.earlyMin;
    const { team } = department.kinds[kind]!;
    const visit: Visit = { readyMin, scanner, able: 1 << scanner, order: startMin, team, staff: 1 };
    return [{ visit, patient, appointment }];
  }

  /** Emergencies and standstills: nobody booked them. */
  function comeUnbooked(coming: Coming[]): void {
    const opens = Math.min(...scanners.map((s) => s.open[0]?.[0] ?? Infinity));
    const closes = Math.max(...scanners.map((s) => s.open.at(-1)?.[1] ?? -Infinity));
    const many = emergencies.any ? poisson(emergencyTimes(), department.emergenciesPerDay) : 0;
    for (let i = 0; i < many; i++) {
      const readyMin = opens + (closes - opens) * emergencyTimes();
      const patient = emergencies.next(0);
      const { places, team } = department.kinds[patient.kind]!;
      const able = places.reduce(
        (bits, place, s) => (place === undefined ? bits : bits | (1 << s)),
        0,
      );
      if (able === 0) {
        count.cannotTake += 1;
        continue;
      }
      const visit: Visit = {
        readyMin,
        scanner: -1,
        able,
        order: beforeAll + readyMin,
        team,
        staff: 1,
      };
      coming.push({ visit, patient });
    }
    scanners.forEach(({ open }, s) => {
      const [happens, when, howLong] = [standstills[s]!(), standstills[s]!(), standstills[s]!()];
      if (happens >= department.downShare || open.length === 0) return;
      const from = open[0]![0];
      const readyMin = from + when * (open.at(-1)![1] - from);
      const visit: Visit = {
        readyMin,
        scanner: s,
        able: 1 << s,
        order: 2 * beforeAll,
        team: -1,
        staff: 0,
      };
      coming.push({ visit, downMin: exponential(howLong, department.downMeanMin) });
    });
  }

  function serve(coming: readonly Coming[], day: number): void {
    coils.fill(-1);
    const served = serveDay(
      coming.map((c) => c.visit),
      rules,
      (n, s) => minutesOf(coming[n]!, s, day),
    );
    const lastEnd = new Float64Array(scanners.length);
    coming.forEach(({ patient, appointment }, n) => {
      const s = served.scanner[n]!;
      if (s < 0) {
        if (patient === undefined) return;
        count.sentHome += 1;
        // An emergency that the day has no room for is taken over by others on call: not this department's list.
        if (appointment !== undefined) list.unshift(followUps.again(patient));
        return;
      }
      const startMin = served.startMin[n]!;
      const endMin = served.endMin[n]!;
      if (patient === undefined) return;
      const { open } = scanners[s]!;
      for (const [from, to] of open)
        count.busyMin += Math.max(0, Math.min(endMin, to) - Math.max(startMin, from));
      lastEnd[s] = Math.max(lastEnd[s]!, endMin);
      const { readyMin } = coming[n]!.visit;
      if (appointment === undefined) count.emergencyWaits.add(startMin - readyMin);
      else {
        count.waits.add(Math.max(0, startMin - Math.max(readyMin, appointment.startMin)));
        count.booked += 1;
        if (patient.followUp === 0) count.daysWaited.add(day - patient.askedDay);
      }
    });
    scanners.forEach(({ open }, s) => {
      count.overtimeMin += Math.max(0, lastEnd[s]! - (open.at(-1)?.[1] ?? Infinity));
    });
  }

  /** The minutes a visit takes the scanner; what came of it is counted as it happens. */
  function minutesOf({ patient, appointment, downMin }: Coming, s: number, day: number): number {
    if (patient === undefined) return downMin ?? 0;
    const { draws } = patient;
    const kind = department.kinds[patient.kind]!;
    const place = kind.places[s]!;
    let beforeMin = 0;
    if (coils[s] !== -1 && coils[s] !== kind.coil)
      beforeMin +=
        department.coilChangeMeanMin *
        lognormalFactor(
          normalQuantile(Math.max(1e-16, draws[drawAt.coil]!)),
          department.coilChangeCv,
        );
    coils[s] = kind.coil;
    if (kind.contrast && draws[drawAt.cannula]! < department.cannulaShare)
      beforeMin += exponential(draws[drawAt.cannulaMin]!, department.cannulaMeanMin);
    const limitS = 60 * (place.slotMin + department.cutShortAfterMin - beforeMin);
    runExam(place.run, draws, drawAt.exam, limitS, run);
    const minutes = beforeMin + run.tableS / 60;
    if (appointment !== undefined && minutes > place.slotMin) count.overran += 1;
    countAnswers(patient, day);
    return minutes;
  }

  function countAnswers(patient: Patient, day: number): void {
    const { questions } = department.kinds[patient.kind]!;
    let any = 0;
    let diagnostic = 0;
    let open = 0;
    for (let q = 0; q < questions; q++) {
      const had = (patient.answered >> q) & 1;
      const rank = run.ranks[q]!;
      if (rank > 0) any += 1;
      if (rank === 3) {
        diagnostic += 1;
        if (had === 0) {
          count.diagnostic += 1;
          patient.answered |= 1 << q;
        }
      } else if (had === 0) open += 1;
    }
    count.patients += 1;
    count.belowDiagnostic += open;
    if (any > 0 && diagnostic === 0) count.quickLookOnly += 1;
    if (run.repeats > 0) count.repeated += 1;
    if (run.gaveUp) count.brokenOff += 1;
    if (run.cutShort) count.cutShort += 1;
    const comesBack = open > 0 && patient.draws[drawAt.comesBack]! < department.followUpShare;
    if (!comesBack || patient.followUp >= mostVisits) return;
    count.followUps += 1;
    const due = day + department.followUpAfterDays;
    const followUp = patient.followUp + 1;
    owed.push({ day: due, patient: followUps.again(patient, { askedDay: due, followUp }) });
  }
}

/** Who does not come a third time is not booked again. Ours, an assumption. */
const mostMissed = 2;
/** After two further visits the clinicians take another way. Ours, an assumption. */
const mostVisits = 2;

function rulesOf(department: SimDepartment): DayRules {
  const { scanners, teams, technologists, overtimeUpToMin } = department;
  return {
    scanners: scanners.length,
    closed: scanners.map(closedOf),
    teams,
    atOnce: technologists,
    lastStartMin: scanners.map(({ open }) => (open.at(-1)?.[1] ?? 0) + overtimeUpToMin),
  };
}

/** Stretches in which nothing starts: before opening and between open stretches. */
function closedOf({ open }: SimScanner): readonly (readonly [number, number])[] {
  let before = 0;
  return open.flatMap(([from, to]) => {
    const closed: readonly [number, number] = [before, from];
    before = to;
    return closed[1] > closed[0] ? [closed] : [];
  });
}
