import { describe, expect, it } from 'vitest';
import { checkScenario, firstScenarios, type Scenario } from '../../src/throughput/index.js';
import { ground, usual } from './ground.js';

describe('a bad scenario gets a word at its field', () => {
  const examIds = [...ground.library.exams.keys()];
  const fields = (change: Partial<Scenario>) =>
    checkScenario({ ...usual, ...change }, { examIds }).map((p) => p.field);

  it('none of the shipped ones has any', () => {
    for (const scenario of firstScenarios(usual))
      expect(checkScenario(scenario, { examIds })).toEqual([]);
  });

  it.each<[string, Partial<Scenario>, string]>([
    ['no scanner', { scanners: [] }, 'scanners'],
    [
      '30-hour days',
      { scanners: [{ ...usual.scanners[0]!, hours: [{ fromMin: 0, toMin: 30 * 60 }] }] },
      'hours mr1',
    ],
    ['the same scanner twice', { scanners: [usual.scanners[0]!, usual.scanners[0]!] }, 'scanners'],
    ['negative rates', { requestsPerDay: -3 }, 'requestsPerDay'],
    ['no number at all', { emergenciesPerDay: Number.NaN }, 'emergenciesPerDay'],
    ['shares above one', { lateShare: 11 }, 'lateShare'],
    ['a million days', { months: 500, daysAMonth: 60 }, 'months'],
    ['a million months', { months: 1_000_000 }, 'months'],
    ['half a scanner team', { teams: [{ name: 'play', count: 0.5, groups: ['child'] }] }, 'teams'],
    ['slots of seven minutes', { slots: { kind: 'fixed', minutes: 7 } }, 'slots'],
    ['slots of two hours', { slots: { kind: 'tolerance', mostMin: 120 } }, 'slots'],
    ['an exam nobody knows', { examShares: { elbow: 1 } }, 'examShares'],
    ['shares that are all 0', { groupShares: { settled: 0 } }, 'groupShares'],
    ['no name', { name: ' ' }, 'name'],
    ['a name of a page', { name: 'x'.repeat(81) }, 'name'],
    [
      'a team with a name of a page',
      { teams: [{ name: 'x'.repeat(61), count: 1, groups: [] }] },
      'teams',
    ],
    [
      'a thousand breaks',
      {
        scanners: [
          {
            ...usual.scanners[0]!,
            breaks: Array.from({ length: 1000 }, (_, n) => ({ fromMin: n, toMin: n + 1 })),
          },
        ],
      },
      'hours mr1',
    ],
  ])('%s', (_, change, field) => {
    expect(fields(change)).toEqual([field]);
  });

  it('says value, limit and way out', () => {
    const [first] = checkScenario({ ...usual, requestsPerDay: -3 }, { examIds });
    expect(first!.problem).toMatchObject({
      value: '-3',
      limit: expect.stringContaining('from 0 to 500'),
    });
    expect(first!.problem.wayOut).not.toBe('');
  });
});
