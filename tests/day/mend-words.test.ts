import { describe, expect, it } from 'vitest';
import {
  changedAnswers,
  disturbanceWords,
  mend,
  moveWords,
  type BookedVisit,
  type Booking,
  type Department,
  type Offer,
  type Repair,
} from '../../src/day/index.js';

const date = '2027-03-01';
const scanner = (id: string) => ({
  ...{ id, name: `Scanner ${id}`, fieldT: 1.5 as const, boreCm: 60, coils: ['head'] },
  ...{ hours: [{ fromMin: 480, toMin: 1080 }], breaks: [] },
});
const department: Department = {
  ...{ name: 'Invented', zone: 'UTC', days: [date] },
  scanners: [scanner('A'), scanner('B')],
};
const at = (requestId: string, scannerId: string, startMin: number, slotMin = 30): Booking => ({
  ...{ requestId, scannerId, date, startMin, slotMin },
});
const offer = (words: string): Offer => ({
  ...{ slotMin: 30, diagnostic: 1, targeted: 1, screening: 1, chance: 1, words },
});

// The words are the project's own; that a low grade never stands without its own is a rule of the house.
describe('a proposal in words', () => {
  it('names only the answers that change, each grade with its words', () => {
    const was = 'Cord: diagnostic; Marrow: targeted: this question only; Root: diagnostic';
    const is = 'Cord: diagnostic; Marrow: not answered; Root: screening-grade, not diagnostic';
    expect(changedAnswers(was, is)).toBe(
      'Marrow: not answered (was: targeted: this question only); Root: screening-grade, not diagnostic (was: diagnostic)',
    );
    expect(changedAnswers('Cord: diagnostic', 'Root: diagnostic')).toBe(
      'Root: diagnostic (was: Cord: diagnostic)',
    );
  });

  it('says the scanner once where it stays, the day where it changes, and that a place is kept', () => {
    const words = (from: Booking, to: Booking) => moveWords(from, to, department, date);
    expect(words(at('R', 'A', 600), at('R', 'A', 690))).toBe(
      'from 10:00 to 11:30 on Scanner A: 1 h 30 min later',
    );
    expect(words(at('R', 'A', 600), at('R', 'B', 570))).toBe(
      'from 10:00 on Scanner A, to 09:30 on Scanner B: 30 minutes earlier',
    );
    expect(words(at('R', 'A', 600), { ...at('R', 'A', 480), date: '2027-03-02' })).toContain(
      'to 2027-03-02 08:00 on Scanner A: a later day',
    );
    expect(words(at('R', 'A', 600), at('R', 'A', 600, 15))).toBe('keeps 10:00 on Scanner A');
  });

  it('counts who moves apart from who only gets another slot, and the emergency as neither', () => {
    const move = (from: Booking | undefined, to: Booking): Repair['moves'][number] => ({
      ...(from === undefined ? {} : { from }),
      ...{
        requestId: to.requestId,
        to,
        shiftMin: 0,
        answers: '',
        diagnosticChange: 0,
        because: '',
      },
    });
    const repair: Repair = {
      moves: [
        move(undefined, at('E', 'A', 600)),
        move(at('R', 'A', 600), at('R', 'A', 660)),
        move(at('S', 'B', 600), at('S', 'B', 600, 15)),
      ],
      ...{ withoutPlace: [], waitOnSite: [], peopleMoved: 1, shiftMin: 60 },
      stuck: [{ requestId: 'T', why: '' }],
      ...{ fewest: true, shorterSlots: true },
    };
    expect(disturbanceWords(repair)).toBe(
      '1 person moves, by 1 h; 1 person with another slot in the same place; 1 person must be spoken with.',
    );
  });

  // Source: whoever the event itself displaces must move; where nobody else does, fewer are impossible.
  it('is proved when only those move whom the event displaced, however little was searched', () => {
    const visits = Array.from({ length: 12 }, (_, n): BookedVisit => {
      const place = at(`R${n}`, 'A', 480 + 30 * n);
      const offers = new Map(['A', 'B'].map((id) => [id, [offer('Q: diagnostic')]] as const));
      const request = { id: place.requestId, priority: 'routine', coil: 'head', offers } as const;
      return { ...place, request: { ...request, canCome: { partOfDay: 'any' } } };
    });
    const event = {
      kind: 'scanner down',
      scannerId: 'A',
      date,
      fromMin: 480,
      toMin: 1080,
    } as const;
    const start = { date, minute: 480 };
    const { proposals } = mend(
      { department, visits, event, now: start, movableFrom: start },
      { nodeBudget: 1 },
    );
    expect(proposals[0]!.moves).toHaveLength(12);
    expect(proposals[0]!.fewest).toBe(true);
  });
});
