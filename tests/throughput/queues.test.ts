import { describe, expect, it } from 'vitest';
import { randomStream } from '../../src/shared/index.js';
import { serveDay, type Visit } from '../../src/throughput/serve-day.js';
import { exponential, lognormalFactor, normalQuantile } from '../../src/throughput/variates.js';
import { oneScanner, queued } from './queues.js';

/** Values of the checks, section 6, with their tags: [D] derived there from stated inputs. */
describe('one scanner against queueing theory', () => {
  it("Lindley's recursion (1952) by hand: arrivals 0, 40, 80, 120; services 30, 55, 20, 45", () => {
    // T1: waits 0, 0, 15, 0; idle 15; finish 165; overtime past 160 is 5.
    const { waits, idle, makespan } = queued([0, 40, 80, 120], [30, 55, 20, 45]);
    expect(waits).toEqual([0, 0, 15, 0]);
    expect(idle).toBe(15);
    expect(makespan).toBe(165);
    expect(makespan - 160).toBe(5);
  });

  it('any arrivals and services follow the recursion W = max(0, W + S - A)', () => {
    const next = randomStream(5, 'recursion');
    for (let trial = 0; trial < 200; trial++) {
      let clock = 0;
      const arrivals = Array.from({ length: 30 }, () => (clock += 40 * next()));
      const services = arrivals.map(() => 45 * next());
      let wait = 0;
      const expected = arrivals.map((at, i) => {
        if (i > 0) wait = Math.max(0, wait + services[i - 1]! - (at - arrivals[i - 1]!));
        return wait;
      });
      queued(arrivals, services).waits.forEach((w, i) => expect(w).toBeCloseTo(expected[i]!, 9));
    }
  });

  it('appointments at the mean with exponential service wait as computed exactly, patient by patient', () => {
    // T2, exact transient values.
    const exact = [0, 0.3679, 0.6386, 0.8626, 1.058, 1.2334, 1.394, 1.5431, 1.6826, 1.8144];
    const days = 200_000;
    const next = randomStream(1, 'service');
    const sums = exact.map(() => 0);
    const squares = exact.map(() => 0);
    const arrivals = exact.map((_, i) => i);
    for (let d = 0; d < days; d++) {
      const { waits } = queued(
        arrivals,
        arrivals.map(() => exponential(next(), 1)),
      );
      waits.forEach((w, i) => {
        sums[i]! += w;
        squares[i]! += w * w;
      });
    }
    exact.forEach((value, i) => {
      const mean = sums[i]! / days;
      const error = Math.sqrt((squares[i]! / days - mean * mean) / days);
      expect(Math.abs(mean - value)).toBeLessThan(4 * error + 5e-5);
    });
  });

  it.each([
    [5, 'individual', 0.5854, 1.058, 6.058],
    [5, 'two at start', 0.949, 0.3937, 5.3937],
    [10, 'individual', 1.0595, 1.8144, 11.8144],
    [10, 'two at start', 1.3712, 1.0408, 11.0408],
  ])('%i patients, %s: mean wait %f, idle %f, finish %f', (n, rule, wait, idle, finish) => {
    // T2, the table. Two at the start is the Bailey-Welch rule (1952): the second patient is asked for with the first.
    const arrivals = Array.from({ length: n }, (_, i) =>
      rule === 'individual' ? i : Math.max(0, i - 1),
    );
    const days = 100_000;
    const next = randomStream(n, rule);
    const seen = { wait: [0, 0], idle: [0, 0], finish: [0, 0] };
    const add = (key: keyof typeof seen, value: number) => {
      seen[key][0]! += value;
      seen[key][1]! += value * value;
    };
    for (let d = 0; d < days; d++) {
      const day = queued(
        arrivals,
        arrivals.map(() => exponential(next(), 1)),
      );
      add('wait', day.waits.reduce((a, b) => a + b, 0) / n);
      add('idle', day.idle);
      add('finish', day.makespan);
    }
    for (const [key, value] of [
      ['wait', wait],
      ['idle', idle],
      ['finish', finish],
    ] as const) {
      const mean = seen[key][0]! / days;
      const error = Math.sqrt((seen[key][1]! / days - mean * mean) / days);
      expect(Math.abs(mean - value), key).toBeLessThan(4 * error + 5e-5);
    }
  });

  /** Mean wait of a long run with its standard error from batches. */
  function longRun(
    patients: number,
    gap: () => number,
    service: () => number,
  ): { readonly mean: number; readonly error: number } {
    const visits: Visit[] = [];
    let clock = 0;
    for (let i = 0; i < patients; i++) {
      visits.push({ readyMin: clock, scanner: 0, able: 1, order: i, team: -1, staff: 1 });
      clock += gap();
    }
    const { startMin } = serveDay(visits, oneScanner, service);
    // The first tenth warms up; the rest in 40 batches, each longer than the queue remembers.
    const from = Math.floor(patients / 10);
    const each = Math.floor((patients - from) / 40);
    const means = Array.from({ length: 40 }, (_, b) => {
      let sum = 0;
      for (let i = 0; i < each; i++) {
        const v = from + b * each + i;
        sum += startMin[v]! - visits[v]!.readyMin;
      }
      return sum / each;
    });
    const mean = means.reduce((a, b) => a + b, 0) / 40;
    const spread = means.reduce((a, m) => a + (m - mean) ** 2, 0) / 39;
    return { mean, error: Math.sqrt(spread / 40) };
  }

  it.each([
    [0, 72],
    [0.25, 76.5],
    [0.5, 90],
    [1, 144],
  ])('Pollaczek-Khinchine, Poisson arrivals, load 0.8, variation %f: wait %f min', (cv, wait) => {
    // T3: mean service 36 min.
    const arrivals = randomStream(11, `arrivals ${cv}`);
    const services = randomStream(11, `services ${cv}`);
    const { mean, error } = longRun(
      600_000,
      () => exponential(arrivals(), 45),
      () =>
        cv === 1
          ? exponential(services(), 36)
          : 36 * lognormalFactor(normalQuantile(Math.max(1e-12, services())), cv),
    );
    expect(Math.abs(mean - wait)).toBeLessThan(3.5 * error);
    expect(error / wait).toBeLessThan(0.02);
  });

  it.each([
    [0.7, 0.8762],
    [0.8, 1.6927],
  ])('D/M/1 at load %f: wait %f services', (load, wait) => {
    // T4: sigma = exp(-(1 - sigma) / load), wait = sigma / (1 - sigma).
    const services = randomStream(13, `services ${load}`);
    const { mean, error } = longRun(
      400_000,
      () => 1 / load,
      () => exponential(services(), 1),
    );
    expect(Math.abs(mean - wait)).toBeLessThan(3.5 * error + 5e-5);
    expect(error / wait).toBeLessThan(0.02);
  });
});

describe('several scanners, teams, closing', () => {
  const visit = (readyMin: number, more: Partial<Visit> = {}): Visit => ({
    ...{ readyMin, scanner: -1, able: 0b11, order: 0, team: -1, staff: 1 },
    ...more,
  });
  const rules = {
    ...oneScanner,
    scanners: 2,
    closed: [[], []],
    lastStartMin: [1e9, 1e9],
    atOnce: 2,
  };

  it('an M/M/2 queue waits as Erlang C says', () => {
    // Erlang 1917: two servers, load 0.75 each: P(wait) = 9/14, Wq = 9/14 / (2 - 1.5) = 1.2857 services.
    const next = randomStream(17, 'two');
    const service = randomStream(17, 'service');
    let clock = 0;
    const visits = Array.from({ length: 400_000 }, (_, order) =>
      visit((clock += exponential(next(), 1 / 1.5)), { order }),
    );
    const { startMin } = serveDay(visits, rules, () => exponential(service(), 1));
    const mean = visits.reduce((sum, v, i) => sum + startMin[i]! - v.readyMin, 0) / visits.length;
    expect(Math.abs(mean - 9 / 14 / 0.5)).toBeLessThan(0.06);
  });

  it('a team that exists once serves one exam at a time', () => {
    const visits = [visit(0, { team: 0 }), visit(0, { team: 0 }), visit(0, { order: 1 })];
    const { startMin, scanner } = serveDay(visits, { ...rules, teams: [1] }, () => 30);
    expect([...startMin]).toEqual([0, 30, 0]);
    expect(scanner[0]).not.toBe(scanner[2]);
  });

  it('with staff for one, two scanners run one after the other', () => {
    const { startMin } = serveDay([visit(0), visit(0)], { ...rules, atOnce: 1 }, () => 20);
    expect([...startMin]).toEqual([0, 20]);
  });

  it('nothing starts in a break; what runs may run into it', () => {
    const closed = [[[60, 90] as const], [[0, 1e6] as const]];
    const visits = [visit(50, { order: 0 }), visit(55, { order: 1 })];
    const { startMin, endMin } = serveDay(visits, { ...rules, closed }, () => 20);
    expect([...startMin]).toEqual([50, 90]);
    expect(endMin[0]).toBe(70);
  });

  it('whoever cannot be started before the last start is sent home', () => {
    const { startMin, scanner } = serveDay(
      [visit(0, { scanner: 0, able: 1 }), visit(0, { scanner: 0, able: 1, order: 1 })],
      { ...rules, lastStartMin: [30, 30] },
      () => 40,
    );
    expect([...startMin]).toEqual([0, -1]);
    expect(scanner[1]).toBe(-1);
  });

  it('an emergency is taken before those who waited longer', () => {
    const visits = [visit(0, { order: 5 }), visit(1, { order: 5 }), visit(2, { order: -1 })];
    const { startMin } = serveDay(visits, { ...oneScanner, lastStartMin: [1e9] }, () => 10);
    expect([...startMin]).toEqual([0, 20, 10]);
  });
});
