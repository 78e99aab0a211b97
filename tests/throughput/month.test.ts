import { beforeAll, describe, expect, it } from 'vitest';
import { chanceWithin } from '../../src/planning/distribution.js';
import { randomStream } from '../../src/shared/index.js';
import { drawsPerExam, emptyRun, runExam } from '../../src/throughput/exam-run.js';
import { simulateMonth, type SimDepartment } from '../../src/throughput/index.js';
import { PatientSource } from '../../src/throughput/patients.js';
import { simulateMonths } from '../../src/throughput/pool/month-pool.js';
import { compiledWorker } from './compiled-worker.js';
import { book, department, requests, usual, worked } from './ground.js';

const byTolerance = {
  ...usual,
  slots: { kind: 'tolerance', mostMin: 60 },
  content: 'planned',
} as const;

describe('one exam simulated against its own plan', () => {
  it('table times are distributed as the plan says, for every demo request without timed phases', () => {
    // Kolmogorov 1933: the largest distance of an empirical curve from its law exceeds 1.95 / sqrt(n) once in a thousand;
    // the half second to either side is the plan's grid.
    const run = emptyRun();
    const draws = new Float64Array(drawsPerExam);
    const next = randomStream(4, 'table times');
    const n = 3000;
    let looked = 0;
    for (const request of requests.filter((r) => r.contrast === 'not needed')) {
      const plan = book
        .plansFor(request, department.scanners[0]!, true)
        ?.find((p) => p.slotMin === 45);
      if (plan === undefined || plan.run.order.length === 0) continue;
      looked += 1;
      const without = { ...plan.run, order: plan.run.order.map(({ step }) => ({ step })) };
      const times: number[] = [];
      for (let i = 0; i < n; i++) {
        for (let k = 0; k < drawsPerExam; k++) draws[k] = next();
        // Nobody gives up: the plan's table time knows no breaking off.
        draws[2] = 0;
        runExam(without, draws, 0, Infinity, run);
        times.push(run.tableS);
      }
      times.sort((a, b) => a - b);
      let distance = 0;
      for (let i = 0; i < n; i += 20) {
        const below = chanceWithin(plan.tableTime, Math.floor(times[i]!) - 1);
        const above = chanceWithin(plan.tableTime, Math.ceil(times[i]!) + 1);
        distance = Math.max(distance, i / n - above, below - i / n);
      }
      // The plan keeps triggered times on points a sixth of their deviation apart: 0.01 for that.
      expect(distance, request.id).toBeLessThan(1.95 / Math.sqrt(n) + 0.01);
    }
    expect(looked).toBeGreaterThan(40);
  });

  it('images come out clean as often as the plan says', () => {
    const request = requests.find((r) => r.id === 'R-105')!;
    const plan = book
      .plansFor(request, department.scanners[0]!, false)!
      .find((p) => p.slotMin === 45)!;
    const run = emptyRun();
    const draws = new Float64Array(drawsPerExam);
    const next = randomStream(5, 'clean');
    const n = 20_000;
    const clean = plan.run.needs.map(() => 0);
    for (let i = 0; i < n; i++) {
      for (let k = 0; k < drawsPerExam; k++) draws[k] = next();
      draws[2] = 0;
      runExam(plan.run, draws, 0, Infinity, run);
      run.ranks.forEach((rank, q) => (clean[q]! += rank === 3 ? 1 : 0));
    }
    plan.run.needs.forEach((needs, q) => {
      // A sequence run whole is run once more where it failed.
      const expected = needs.reduce((chance, view) => {
        const { step } = plan.run.order.find((v) => v.step.view === view)!;
        return chance * (step.retakes === 'whole' ? 1 - (1 - step.clean) ** 2 : step.clean);
      }, 1);
      const error = Math.sqrt((expected * (1 - expected)) / n);
      expect(Math.abs(clean[q]! / n - expected)).toBeLessThan(4 * error + 1e-9);
    });
  });

  it('a quick look never lifts an answer to diagnostic where the policy does not', () => {
    for (const request of requests)
      for (const plan of book.plansFor(request, department.scanners[0]!, true) ?? [])
        for (const { quick } of plan.run.order)
          for (const rank of quick?.ranks ?? []) {
            const accepted =
              request.examId === 'bile-ducts' || request.examId === 'fetus-second-opinion';
            if (!accepted) expect(rank).toBeLessThan(3);
          }
  });
});

describe('a month', () => {
  let fixed: SimDepartment;
  let fitted: SimDepartment;
  beforeAll(() => {
    fixed = worked(usual).department;
    fitted = worked(byTolerance).department;
  });

  it('the same seed gives the same month, another seed another', () => {
    expect(simulateMonth(fixed, 3)).toEqual(simulateMonth(fixed, 3));
    expect(simulateMonth(fixed, 3)).not.toEqual(simulateMonth(fixed, 4));
    expect(simulateMonth({ ...fixed, seed: 2 }, 3)).not.toEqual(simulateMonth(fixed, 3));
  });

  it('one and four threads give the same months', async () => {
    const workerFile = compiledWorker();
    const run = (threads: number) =>
      simulateMonths([fixed, fitted], { threads, months: 5, workerFile });
    const [one, four] = [await run(1), await run(4)];
    expect(four).toEqual(one);
    expect(one.months[1]![2]).toEqual(simulateMonth(fitted, 2));
    expect(one.stopped).toBe(false);
  });

  it('a stopped run leaves what it had', async () => {
    const stop = new AbortController();
    const run = await simulateMonths([fixed, fitted], {
      threads: 2,
      months: 400,
      workerFile: compiledWorker(),
      signal: stop.signal,
      onMonth: (done) => {
        if (done === 9) stop.abort();
      },
    });
    expect(run.stopped).toBe(true);
    expect(run.months[0]!.length).toBeGreaterThan(1);
    expect(run.months[0]!.length).toBeLessThan(12);
    expect(run.months[0]![1]).toEqual(simulateMonth(fixed, 1));
  });

  it('the k-th patient is the same under every policy', () => {
    const patients = (d: SimDepartment) => {
      const source = new PatientSource(d.seed, 2, 'booked', d.kinds);
      return Array.from({ length: 50 }, (_, day) => source.next(day));
    };
    expect(patients(fitted)).toEqual(patients(fixed));
  });

  it('one more scanner leaves patients, requests and the other scanners as they were', () => {
    const more = {
      ...fixed,
      scanners: [...fixed.scanners, { ...fixed.scanners[0]!, id: 'mr4' }],
      kinds: fixed.kinds.map((k) => ({ ...k, places: [...k.places, k.places[0]] })),
      technologists: 4,
    };
    // Where the new scanner can take nobody, the month must come out as it was, standstills and all.
    const shut = {
      ...more,
      kinds: fixed.kinds.map((k) => ({ ...k, places: [...k.places, undefined] })),
    };
    const { idleMinPerScannerDay: _, ...before } = simulateMonth({ ...fixed, downShare: 0.3 }, 1);
    const { idleMinPerScannerDay: __, ...after } = simulateMonth({ ...shut, downShare: 0.3 }, 1);
    expect(after).toEqual(before);
    expect(simulateMonth(more, 1).patientsPerDay).toBeGreaterThan(before.patientsPerDay);
  });

  it('nobody is served without a scanner, and a department without requests has nothing to do', () => {
    const empty = simulateMonth(
      { ...fixed, requestsPerDay: 0, listAtStart: 0, emergenciesPerDay: 0 },
      0,
    );
    expect(empty.patientsPerDay).toBe(0);
    expect(empty.overtimeMinPerDay).toBe(0);
    const none = simulateMonth({ ...fixed, kinds: [] }, 0);
    expect(none.patientsPerDay).toBe(0);
    expect(none.listAtEnd).toBe(0);
  });

  it('with everybody punctual and nothing going wrong, a day of empty slots keeps to the clock', () => {
    const calm: SimDepartment = {
      ...fixed,
      ...{ noShowShare: 0, lateShare: 0, earlyMin: 0, downShare: 0, cannulaShare: 0 },
      ...{ emergenciesPerDay: 0, coilChangeMeanMin: 0, listAtStart: 4000 },
      kinds: fixed.kinds.map((k) => ({
        ...k,
        places: k.places.map((p) => (p === undefined ? p : { ...p, slotMin: 90 })),
      })),
    };
    const month = simulateMonth(calm, 0);
    expect(month.waitNinetiethMin).toBeLessThan(1);
    expect(month.overtimeMinPerDay).toBe(0);
    expect(month.overrunShare).toBe(0);
    // 9.5, 9.5 and 9 open hours hold 6 + 6 + 5 slots of 90 minutes around the breaks (by hand: 3+3, 3+3, 2+3).
    expect(month.patientsPerDay).toBe(17);
  });

  it('a longer list, more requests or more staff never serve fewer', () => {
    const patients = (d: SimDepartment) =>
      [0, 1, 2].reduce((sum, m) => sum + simulateMonth(d, m).patientsPerDay, 0);
    expect(patients({ ...fixed, listAtStart: 600 })).toBeGreaterThanOrEqual(patients(fixed) - 0.05);
    expect(patients(fixed)).toBeGreaterThan(patients({ ...fixed, technologists: 1 }) + 10);
  });
});
