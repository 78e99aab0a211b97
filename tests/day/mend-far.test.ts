import { describe, expect, it } from 'vitest';
import { farShiftMin, mend, type Repair } from '../../src/day/index.js';
import { generatedEvent, repairFaults } from './events.js';

// Holds for any right repair: what a limit promises is kept, and what it costs is people, never places.
describe('a proposal that spares those who would move far', () => {
  it('stands beside the first wherever it exists, keeps its limit and leaves nobody more without a place', () => {
    let far = 0;
    let nearer = 0;
    for (let seed = 0; seed < 300; seed++) {
      const problem = generatedEvent(seed, {
        ...{ scanners: 2 + (seed % 3), days: 1 + (seed % 2), requests: 40, teams: 0.05 },
      });
      if (problem === undefined) continue;
      const { proposals } = mend(problem);
      const [first, ...others] = proposals;
      const longest = (moves: Repair['moves']) =>
        Math.max(0, ...moves.map((m) => (m.from === undefined ? 0 : m.shiftMin)));
      if (first!.shiftLimitMin !== undefined) throw new Error('the first has no limit');
      const moved = longest(first!.moves);
      if (moved > farShiftMin) far += 1;
      for (const limited of others.filter((p) => p.shiftLimitMin !== undefined)) {
        nearer += 1;
        expect(moved).toBeGreaterThan(farShiftMin);
        expect(longest(limited.moves)).toBeLessThanOrEqual(limited.shiftLimitMin!);
        expect(limited.withoutPlace.length).toBeLessThanOrEqual(first!.withoutPlace.length);
        expect(limited.shorterSlots).toBe(false);
        expect(repairFaults(problem, limited)).toEqual([]);
      }
    }
    expect(far).toBeGreaterThan(10);
    expect(nearer).toBeGreaterThan(5);
  });
});
