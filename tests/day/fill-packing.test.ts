import { describe, expect, it } from 'vitest';
import { Board, type Seat } from '../../src/day/fill-board.js';
import { Packing } from '../../src/day/fill-packing.js';
import { layOut } from '../../src/day/fill-problem.js';
import type { Part } from '../../src/day/fill-rooms.js';
import { stream } from '../planning/instances.js';
import { inventedDepartment } from './departments.js';

function orders<T>(list: readonly T[]): readonly (readonly T[])[] {
  return list.length === 0
    ? [[]]
    : list.flatMap((x, i) =>
        orders([...list.slice(0, i), ...list.slice(i + 1)]).map((rest) => [x, ...rest]),
      );
}

describe('a packing', () => {
  // Source: every order of up to six visits tried on a board.
  it('says that somebody fits exactly when some order on the board fits', () => {
    let fitting = 0;
    let not = 0;
    for (let seed = 0; seed < 400; seed++) {
      const random = stream('packing', seed);
      const open = 600 + 5 * Math.floor(random() * 30);
      const problem = inventedDepartment(seed, {
        scanners: 1,
        days: 1,
        requests: 6,
        hours: [open, open + 90 + 5 * Math.floor(random() * 12)],
      });
      const ground = layOut(problem);
      const packing = new Packing(ground, new Board(ground));
      const seats: Seat[] = [];
      for (let r = 0; r < 6; r++) {
        const first = packing.firstOption(r, 0);
        const many = packing.endOption(r, 0) - first;
        if (many === 0) continue;
        const number = first + Math.floor(random() * many);
        const option = packing.table.options[number]!;
        const seat = { request: r, option, ...ground.lines[0]!.windows[r]! };
        const says = packing.freeSteps(packing.table.part[r] as Part, 0) >= option.steps;
        const some = orders([...seats, seat]).some((x) => new Board(ground).replace(0, x));
        expect({ seed, r, fits: says }).toEqual({ seed, r, fits: some });
        if (!some) {
          not++;
          continue;
        }
        fitting++;
        seats.push(seat);
        packing.put(r, 0, number);
      }
      packing.keep();
      const board = packing.boardOf(packing.where, packing.option);
      expect(board.seatsOf(0)).toHaveLength(seats.length);
      // Taken out and undone: as before.
      const { value } = packing;
      for (const { request } of seats) packing.put(request, -1, -1);
      expect(packing.value).toBeCloseTo(0, 9);
      packing.undo();
      expect(packing.value).toBeCloseTo(value, 9);
      expect(packing.boardOf(packing.where, packing.option).objective()).toEqual(board.objective());
    }
    expect(fitting).toBeGreaterThan(500);
    expect(not).toBeGreaterThan(200);
  });

  // Source: holds for any right planner: a visit with a team stays to the minute.
  it('leaves visits with a team where they are', () => {
    const problem = inventedDepartment(3, {
      scanners: 2,
      days: 2,
      requests: 30,
      teams: 0.3,
    });
    const ground = layOut(problem);
    const board = new Board(ground);
    problem.waiting.forEach((_, r) => {
      let placed = false;
      board.eachSpot(r, (spot) => {
        if (!placed && spot.start % 3 === 0) placed = board.put(r, spot);
      });
    });
    const packing = new Packing(ground, board);
    packing.where.forEach((room, r) => {
      if (room >= 0) packing.put(r, -1, -1);
    });
    const left = packing.boardOf(packing.where, packing.option);
    const withTeam = problem.waiting.flatMap((w, r) => (w.team === undefined ? [] : [r]));
    expect(withTeam.some((r) => board.where[r]! >= 0)).toBe(true);
    const startOn = (b: Board, r: number) => {
      const s = b.where[r]!;
      return s < 0 ? [s] : [s, b.startsOf(s)[b.seatsOf(s).findIndex((x) => x.request === r)]];
    };
    for (const r of withTeam) expect(startOn(left, r)).toEqual(startOn(board, r));
    problem.waiting.forEach((w, r) => {
      if (w.team === undefined) expect(left.where[r]).toBe(-1);
    });
  });
});
