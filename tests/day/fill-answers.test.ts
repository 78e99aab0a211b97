import { describe, expect, it } from 'vitest';
import { Board } from '../../src/day/fill-board.js';
import { upperBound } from '../../src/day/fill-bound.js';
import { fillExactly } from '../../src/day/fill-exact.js';
import { layOut } from '../../src/day/fill-problem.js';
import { brokenRules, fill, fillAll } from '../../src/day/index.js';
import { stream } from '../planning/instances.js';
import { inventedDepartment } from './departments.js';
import { highsDay, type DayByHighs } from './highs-day.js';
import { bestFillByTryingAll } from './try-all.js';

describe('filling the day', () => {
  // Source: exhaustive search over every start, scanner and offer, all six tiers.
  it('is the best of all placements on toy days', () => {
    let crowded = 0;
    for (let seed = 0; seed < 60; seed++) {
      const problem = inventedDepartment(seed, {
        scanners: 1 + (seed % 2),
        days: 1,
        requests: 3,
        taken: seed % 3,
        hours: seed % 4 === 0 ? [690, 760] : [480, 555],
        offers: 2 + (seed % 2),
      });
      const expected = bestFillByTryingAll(problem);
      const ground = layOut(problem);
      const exact = fillExactly(ground, new Board(ground))!;
      expect({ seed, proved: exact.proved, ...exact.objective }).toEqual({
        seed,
        proved: true,
        ...expected,
      });
      if (exact.best.where.some((s) => s < 0) && expected.screening > 0) crowded++;
      const bound = upperBound(ground, 'diagnostic', -1, 60).bound;
      expect(bound).toBeGreaterThanOrEqual(expected.diagnostic);
    }
    expect(crowded).toBeGreaterThan(20);
  });

  // Source: second solver, HiGHS, stage by stage over answers and overruns, proved optimal.
  it('equals HiGHS where HiGHS proves the optimum, by the exact method and by the search within 1 %', async () => {
    let proved = 0;
    for (let seed = 100; seed < 140; seed++) {
      const problem = inventedDepartment(seed, {
        scanners: 1 + (seed % 2),
        days: 1,
        requests: 7,
        taken: seed % 4,
        hours: seed % 3 === 0 ? [660, 800] : [480, 600],
        offers: 3,
      });
      const expected = (await highsDay(problem, 'whole')) as DayByHighs;
      const exact = fillAll(problem, { random: stream('exact', seed), iterations: 100 });
      const { diagnostic, targeted, screening, overrunPercent } = exact.objective;
      if (exact.provedBy.startsWith('exact')) {
        proved++;
        expect({ seed, diagnostic, targeted, screening, overrunPercent }).toEqual({
          seed,
          ...expected,
        });
      }
      const searched = fillAll(problem, {
        random: stream('search', seed),
        iterations: 600,
        exactNodes: 0,
      });
      expect(searched.objective.diagnostic).toBeGreaterThanOrEqual(0.99 * expected.diagnostic);
      expect(searched.objective.diagnostic).toBeLessThanOrEqual(expected.diagnostic);
      expect(searched.bound.diagnostic).toBeGreaterThanOrEqual(expected.diagnostic);
    }
    expect(proved).toBeGreaterThan(30);
  });

  // Source: second solver, HiGHS on the linear relaxation of the time-indexed model (Lagrangian duality: Geoffrion 1974).
  it('has a bound that is never below the linear one and close above it', async () => {
    for (let seed = 200; seed < 212; seed++) {
      const problem = inventedDepartment(seed, { scanners: 2, days: 2, requests: 40, taken: 6 });
      const linear = (await highsDay(problem, 'relaxed')) as number;
      const { bound } = upperBound(layOut(problem), 'diagnostic', 0);
      expect(bound).toBeGreaterThanOrEqual(Math.floor(linear - 1e-6));
      expect(bound).toBeLessThanOrEqual(1.005 * linear);
    }
  });

  // Source: second solver, HiGHS, linear bound of a department's week (4 scanners, 80 requests, 5 days).
  it('comes near the linear bound for a crowded week, and its own bound says how near', async () => {
    for (const seed of [1, 2, 7]) {
      const problem = inventedDepartment(seed, {
        scanners: 4,
        days: 5,
        requests: 80,
        taken: 450,
      });
      const linear = (await highsDay(problem, 'relaxed')) as number;
      const filled = fillAll(problem, { random: stream('week', seed), iterations: 6000 });
      const reached = filled.objective.diagnostic;
      expect(brokenRules(problem, filled.placements)).toEqual([]);
      expect(filled.bound.diagnostic).toBeGreaterThanOrEqual(reached);
      expect(filled.bound.diagnostic).toBeGreaterThanOrEqual(Math.floor(linear - 1e-6));
      expect(filled.bound.diagnostic).toBeLessThanOrEqual(1.003 * linear);
      // Whole people in gaps between bookings: the linear bound itself lies above what can be reached.
      expect(reached).toBeGreaterThanOrEqual(0.97 * linear);
      expect(filled.gap).toBeCloseTo(1 - reached / filled.bound.diagnostic, 12);
    }
  });

  // Source: second solver, HiGHS, linear bound; its integer optimum lies within 0.1 % of it on such weeks.
  it('ends within half a percent of the linear bound on weeks with long free stretches', async () => {
    for (const seed of [6, 7]) {
      const size = { scanners: 4, days: 5, requests: 80, taken: 10, hours: [630, 810] } as const;
      const problem = inventedDepartment(seed, size);
      const linear = (await highsDay(problem, 'relaxed')) as number;
      const filled = fillAll(problem, { random: stream('open week', seed), iterations: 9000 });
      expect(brokenRules(problem, filled.placements)).toEqual([]);
      expect(filled.bound.diagnostic).toBeLessThanOrEqual(1.002 * linear);
      expect(filled.objective.diagnostic).toBeGreaterThanOrEqual(0.995 * linear);
    }
  });

  // Source: holds for any right planner that reports as it goes.
  it('reports, can be stopped at any report, never falls back and repeats for the same stream', () => {
    const problem = inventedDepartment(7, { scanners: 2, days: 2, requests: 45 });
    const options = () => ({ random: stream('stop', 1), iterations: 200, reportEvery: 20 });
    const reached: number[] = [];
    for (const report of fill(problem, options())) {
      expect(report.bound.diagnostic).toBeGreaterThanOrEqual(report.objective.diagnostic);
      reached.push(report.objective.diagnostic);
      if (report.iteration === 100) {
        const { placements, waiting } = report.proposal();
        expect(brokenRules(problem, placements)).toEqual([]);
        expect(placements.length + waiting.length).toBe(45);
      }
    }
    expect(reached).toHaveLength(10);
    expect([...reached].sort((a, b) => a - b)).toEqual(reached);
    expect(fillAll(problem, options())).toEqual(fillAll(problem, options()));
  });
});
