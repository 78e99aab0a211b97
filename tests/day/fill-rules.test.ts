import { describe, expect, it } from 'vitest';
import { bookingConflicts, brokenRules, fillAll, type FillProblem } from '../../src/day/index.js';
import { stream } from '../planning/instances.js';
import { inventedDepartment } from './departments.js';

const days = 2000;

function generated(seed: number): FillProblem {
  const random = stream('generated day', seed);
  const whole = (low: number, high: number) => low + Math.floor(random() * (high - low + 1));
  return inventedDepartment(10_000 + seed, {
    scanners: whole(1, 4),
    days: whole(1, 3),
    requests: whole(0, 24),
    taken: whole(0, 25),
    hours: [whole(84, 120) * 5, whole(150, 220) * 5],
    offers: whole(1, 4),
    teams: random() < 0.4 ? 0.3 : 0,
  });
}

describe('a filled day keeps every hard rule', () => {
  // Source: holds for any right planner; the conflicts are found by the booking check that the store also uses.
  it('2,000 generated days: no overlap, closed hour, break, missing ability, or visit when the patient cannot come', () => {
    let placed = 0;
    let left = 0;
    let teams = 0;
    for (let seed = 0; seed < days; seed++) {
      const problem = generated(seed);
      const proposal = fillAll(problem, {
        random: stream('fill', seed),
        iterations: 20,
        boundRounds: 10,
        exactNodes: 0,
        reportEvery: 1000,
      });
      const { placements, waiting } = proposal;
      const broken = brokenRules(problem, placements);
      if (broken.length > 0) expect({ seed, broken }).toEqual({ seed, broken: [] });
      const conflicts = bookingConflicts([...problem.taken, ...placements], problem.department);
      if (conflicts.length > 0) expect({ seed, conflicts }).toEqual({ seed, conflicts: [] });
      for (const p of placements) {
        const request = problem.waiting.find((r) => r.id === p.requestId)!;
        const scanner = problem.department.scanners.find((s) => s.id === p.scannerId)!;
        if (!scanner.coils.includes(request.coil)) throw new Error(`seed ${seed}: missing coil`);
        if (request.team !== undefined) teams++;
        if (p.why.length < 3) throw new Error(`seed ${seed}: ${p.requestId} is not explained`);
      }
      for (const w of waiting)
        if (w.why === '' || w.ways.length === 0)
          throw new Error(`seed ${seed}: ${w.requestId} waits without a reason or way in`);
      expect(placements.length + waiting.length).toBe(problem.waiting.length);
      expect(proposal.bound.diagnostic).toBeGreaterThanOrEqual(proposal.objective.diagnostic);
      placed += placements.length;
      left += waiting.length;
    }
    expect(placed).toBeGreaterThan(8000);
    expect(left).toBeGreaterThan(1000);
    expect(teams).toBeGreaterThan(200);
  });

  // Source: holds for any right planner: the checker itself must see each kind of fault.
  it('the check names every kind of broken rule', () => {
    const base = inventedDepartment(1, { scanners: 1, days: 1, requests: 1 });
    const scanner = {
      ...base.department.scanners[0]!,
      hours: [{ fromMin: 480, toMin: 900 }],
      breaks: [{ fromMin: 720, toMin: 750 }],
    };
    const offer = { slotMin: 20, diagnostic: 1, targeted: 1, screening: 1, chance: 0.9, words: '' };
    const request = {
      id: 'R0',
      priority: 'stat' as const,
      dueDate: '2027-02-28',
      canCome: { partOfDay: 'morning' as const, from: '2027-03-02', until: '2027-02-27' },
      coil: 'head',
      team: 'anaesthesia',
      offers: new Map([[scanner.id, [offer]]]),
    };
    const day = base.department.days[0]!;
    const problem: FillProblem = {
      department: { ...base.department, scanners: [scanner] },
      taken: [
        {
          requestId: 'B',
          scannerId: scanner.id,
          date: day,
          startMin: 735,
          slotMin: 30,
          team: 'anaesthesia',
        },
      ],
      waiting: [request],
    };
    const at = (startMin: number, slotMin: number) =>
      brokenRules(problem, [
        { requestId: 'R0', scannerId: scanner.id, date: day, startMin, slotMin },
      ]).join('\n');
    expect(at(740, 25)).toMatch(/break/);
    expect(at(740, 25)).toMatch(/overlaps B/);
    expect(at(740, 25)).toMatch(/does not offer/);
    expect(at(740, 20)).toMatch(/mornings only/);
    expect(at(740, 20)).toMatch(/team anaesthesia is with B/);
    expect(at(470, 20)).toMatch(/closed/);
    expect(at(500, 20)).toMatch(/before the patient can come/);
    expect(at(500, 20)).toMatch(/after the patient can come/);
    expect(at(500, 20)).toMatch(/stat after its due date/);
    expect(at(503, 20)).toMatch(/grid/);
  });
});
