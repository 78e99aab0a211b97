import { describe, expect, it } from 'vitest';
import { mend, type BookedVisit, type Booking, type MendProblem } from '../../src/day/index.js';

describe('people who are there already', () => {
  const date = '2027-03-01';
  const place = (requestId: string, startMin: number, slotMin: number): Booking => ({
    ...{ requestId, scannerId: 'S0', date, startMin, slotMin },
  });
  const visit = (booking: Booking): BookedVisit => ({
    ...booking,
    request: {
      id: booking.requestId,
      priority: 'routine',
      canCome: { partOfDay: 'any' },
      coil: 'head',
      offers: new Map(),
    },
  });
  const scanner = {
    ...{ id: 'S0', name: 'Scanner nought', fieldT: 1.5 as const, boreCm: 60, coils: ['head'] },
    hours: [{ fromMin: 480, toMin: 960 }],
    breaks: [{ fromMin: 720, toMin: 750 }],
  };
  const problem = (
    visits: readonly BookedVisit[],
    event: MendProblem['event'],
    minute: number,
    onTheWay: readonly string[],
  ): MendProblem => ({
    department: { name: 'Invented', zone: 'UTC', days: [date], scanners: [scanner] },
    ...{ visits, event, now: { date, minute }, movableFrom: { date, minute } },
    onTheWay: new Set(onTheWay),
  });

  // Source: common practice, no source (a booking stands until somebody has spoken with the patient).
  it('one who must be spoken with keeps the place: nobody is moved into the rest of it', () => {
    const down = { kind: 'scanner down', scannerId: 'S0', date, fromMin: 600, toMin: 840 } as const;
    const { proposals } = mend(
      problem([visit(place('A', 820, 45)), visit(place('B', 780, 30))], down, 600, ['A']),
    );
    expect(proposals[0]!.stuck.map((s) => s.requestId)).toEqual(['A']);
    expect(proposals[0]!.stuck[0]!.why).toContain('Scanner nought');
    expect(proposals[0]!.moves.map((m) => [m.requestId, m.to.startMin])).toEqual([['B', 865]]);
  });

  // Source: common practice, no source (an exam that ran over goes on into the break).
  it('one who is being examined into the break is neither stuck nor sent to wait by another event', () => {
    const late = { kind: 'late', requestId: 'B', minutes: 10 } as const;
    const { proposals } = mend(
      problem([visit(place('A', 690, 45)), visit(place('B', 780, 30))], late, 700, ['A']),
    );
    expect(proposals[0]).toMatchObject({ stuck: [], waitOnSite: [], withoutPlace: [] });
    expect(proposals[0]!.moves.map((m) => [m.requestId, m.to.startMin])).toEqual([['B', 790]]);
  });
});
