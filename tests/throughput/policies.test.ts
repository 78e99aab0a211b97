import { beforeAll, describe, expect, it } from 'vitest';
import { bookDay } from '../../src/throughput/appointments.js';
import { meanWithLimits, simulateMonth, type SimDepartment } from '../../src/throughput/index.js';
import { MonthCount } from '../../src/throughput/month-record.js';
import { PatientSource, type Patient } from '../../src/throughput/patients.js';
import { usual, worked } from './ground.js';

// Facts that hold for any right simulation of these policies; the numbers are worked out by hand beside each.
describe('what a policy does', () => {
  let base: SimDepartment;
  beforeAll(() => {
    base = {
      ...worked(usual).department,
      ...{ emergenciesPerDay: 0, downShare: 0, noShowShare: 0, lateShare: 0, cannulaShare: 0 },
    };
  });

  const waiting = (d: SimDepartment, many: number): Patient[] => {
    const source = new PatientSource(d.seed, 0, 'booked', d.kinds);
    return Array.from({ length: many }, () => source.next(0));
  };
  const months = (d: SimDepartment, n = 6) =>
    Array.from({ length: n }, (_, m) => simulateMonth(d, m));

  it('a day holds as many slots as fit between opening, breaks and closing', () => {
    // 08:00-12:30 and 13:00-18:00: 9 + 10 halves of an hour; 08:00-13:00, 13:30-18:00: 10 + 9; 08:00-12:00, 12:30-17:30: 8 + 10.
    expect(bookDay(waiting(base, 300), base)).toHaveLength(19 + 19 + 18);
    // With five minutes kept free after each: floor((270 + 5) / 35) = 7, (300 + 5) / 35 = 8; 8 + 7; (240 + 5) / 35 = 7, 8.
    const buffered = { ...base, bufferMin: 5 };
    expect(bookDay(waiting(buffered, 300), buffered)).toHaveLength(7 + 8 + 8 + 7 + 7 + 8);
  });

  it('no two appointments of a scanner overlap and none runs into a break or past closing', () => {
    for (const d of [base, { ...base, groupByCoil: true }, { ...base, bufferMin: 10 }]) {
      const day = bookDay(waiting(d, 300), d);
      for (const a of day) {
        const end = a.startMin + a.slotMin;
        const { open } = d.scanners[a.scanner]!;
        expect(open.some(([from, to]) => from <= a.startMin && end <= to)).toBe(true);
        const others = day.filter((b) => b !== a && b.scanner === a.scanner);
        expect(others.some((b) => b.startMin < end && a.startMin < b.startMin + b.slotMin)).toBe(
          false,
        );
      }
    }
  });

  it('urgent requests are booked before others', () => {
    const list = waiting(base, 120);
    const urgent = list.filter((p) => base.kinds[p.kind]!.urgent);
    const day = new Set(bookDay([...list], base).map((a) => a.patient));
    expect(urgent.length).toBeGreaterThan(10);
    for (const p of urgent) expect(day.has(p)).toBe(true);
  });

  it('those who are not booked stay on the list in their order', () => {
    const list = waiting(base, 300);
    const before = [...list];
    const day = new Set(bookDay(list, base).map((a) => a.patient));
    expect(list).toEqual(before.filter((p) => !day.has(p)));
  });

  it('overbooking adds its number to every scanner and day, at times that are taken', () => {
    const over = { ...base, overbooked: 2 };
    const day = bookDay(waiting(over, 400), over);
    expect(day).toHaveLength(56 + 3 * 2);
    const times = day.map((a) => `${a.scanner} ${a.startMin}`);
    expect(times.length - new Set(times).size).toBe(6);
  });

  it('grouped by coil, a scanner changes between two coils once a stretch at most', () => {
    const changes = (d: SimDepartment) => {
      const day = bookDay(waiting(d, 300), d);
      return d.scanners.map((_, s) => {
        const own = day.filter((a) => a.scanner === s).sort((a, b) => a.startMin - b.startMin);
        const coils = own.map((a) => d.kinds[a.patient.kind]!.coil);
        return {
          count: coils.filter((c, n) => n > 0 && c !== coils[n - 1]).length,
          kinds: new Set(coils).size,
        };
      });
    };
    const sum = (list: ReturnType<typeof changes>) => list.reduce((n, { count }) => n + count, 0);
    const grouped = changes({ ...base, groupByCoil: true });
    // Two stretches, each through its coils once, and one more change between them at most.
    for (const { count, kinds } of grouped) expect(count).toBeLessThanOrEqual(2 * (kinds - 1) + 1);
    expect(sum(grouped)).toBeLessThan(sum(changes(base)));
  });

  it('as many do not come as the share says', () => {
    // 56 booked a day: binomial, standard error of the mean over 120 days sqrt(56 * 0.1 * 0.9 / 120).
    const runs = months({ ...base, noShowShare: 0.1 });
    const { mean } = meanWithLimits(runs.map((m) => m.noShowsPerDay));
    expect(Math.abs(mean - 5.6)).toBeLessThan(4 * Math.sqrt((56 * 0.1 * 0.9) / 120));
  });

  it('a team that exists once holds up those who need it, and two of them fewer', () => {
    const wait = (teams: readonly number[]) => {
      const needing = { ...base, teams, kinds: base.kinds.map((k) => ({ ...k, team: 0 })) };
      return meanWithLimits(months(needing, 3).map((m) => m.waitNinetiethMin)).mean;
    };
    // Everybody needs it: one team serves one scanner at a time, three of them all three scanners.
    expect(wait([1])).toBeGreaterThan(wait([2]) + 30);
    expect(wait([2])).toBeGreaterThan(wait([3]));
  });

  it('emergencies wait at most for the exams that run, and the booked wait longer for them', () => {
    const busy = months({ ...base, emergenciesPerDay: 8 }, 4);
    const calm = months(base, 4);
    const mean = (list: typeof busy, of: (m: (typeof busy)[number]) => number) =>
      meanWithLimits(list.map(of)).mean;
    expect(mean(busy, (m) => m.emergencyWaitMedianMin)).toBeLessThan(30);
    expect(mean(busy, (m) => m.waitNinetiethMin)).toBeGreaterThan(
      mean(calm, (m) => m.waitNinetiethMin),
    );
    // Emergencies come on top: eight a day more are served.
    const more = mean(busy, (m) => m.patientsPerDay) - mean(calm, (m) => m.patientsPerDay);
    expect(more).toBeGreaterThan(6);
    expect(more).toBeLessThan(9);
  });

  it('without requests beyond the list, the list is worked off and the days fall empty', () => {
    const [month] = months({ ...base, requestsPerDay: 0, listAtStart: 112, followUpShare: 0 }, 1);
    // Two full days of 56, then nothing.
    expect(month!.patientsPerDay * base.daysAMonth).toBe(112);
    expect(month!.listAtEnd).toBe(0);
  });

  it('with quick looks more of the same patients leave with something seen and nothing diagnostic', () => {
    const quick = worked({ ...usual, content: 'planned', quickLooks: true }).department;
    const strict = worked({ ...usual, content: 'planned' }).department;
    const mean = (d: SimDepartment) =>
      meanWithLimits(months(d, 4).map((m) => m.quickLookOnlyShare)).mean;
    expect(mean(quick)).toBeGreaterThan(mean(strict));
  });
});

describe('what is counted', () => {
  it('waits of nothing are 0, not a part of a minute; whole days are whole', () => {
    const count = new MonthCount();
    for (let i = 0; i < 9; i++) count.waits.add(0);
    count.waits.add(30);
    for (let i = 0; i < 10; i++) count.daysWaited.add(5);
    const month = count.record(1, 1, 0);
    expect(month.waitMedianMin).toBe(0);
    expect(month.waitNinetiethMin).toBe(0);
    expect(month.daysWaitedMedian).toBe(5);
    // Nobody came as an emergency: the month says nothing of their wait.
    expect(month.emergencyWaitMedianMin).toBeNaN();
  });

  it('what no scanner can take is asked for all the same, counted, and replaced by nothing easier', () => {
    const { department } = worked(usual);
    const knees = department.kinds.map((k, n) => (n % 5 === 0 && !k.emergency ? n : -1));
    const without: SimDepartment = {
      ...department,
      kinds: department.kinds.map((k, n) =>
        knees.includes(n) ? { ...k, places: k.places.map(() => undefined) } : k,
      ),
    };
    const few = (d: SimDepartment) => ({ ...d, requestsPerDay: 20, listAtStart: 20, downShare: 0 });
    const [before, after] = [simulateMonth(few(department), 0), simulateMonth(few(without), 0)];
    expect(after.cannotTakePerDay).toBeGreaterThan(1);
    expect(before.cannotTakePerDay).toBe(0);
    expect(after.patientsPerDay).toBeLessThan(before.patientsPerDay);
  });
});
