import { Board, type Seat } from './fill-board.js';
import { noonStep, type Ground } from './fill-problem.js';
import {
  afternoon,
  anyTime,
  isPinned,
  morning,
  optionTable,
  roomsOf,
  type OptionTable,
  type Part,
  type Room,
} from './fill-rooms.js';

/**
 * Who is in which room with what offer, but not in what order: whether somebody fits is read off three sums. In order of
 * mornings only, any time, afternoons only, with the longest of the mornings last, a room holds whatever it can hold in any
 * order; the board sets the order afterwards.
 */
export class Packing {
  readonly table: OptionTable;
  readonly rooms: readonly Room[];
  /** Room of each request, -1 when it waits; number of its offer. */
  readonly where: Int32Array;
  readonly option: Int32Array;
  readonly members: readonly number[][];
  /** Worth of everybody placed. */
  value = 0;

  private readonly line: Int32Array;
  private readonly length: Int32Array;
  private readonly untilNoon: Int32Array;
  /** Steps used per room, by part of the day. */
  private readonly used: readonly [Int32Array, Int32Array, Int32Array];
  private readonly changed: number[] = [];

  constructor(
    readonly ground: Ground,
    private readonly start: Board,
  ) {
    this.table = optionTable(ground);
    this.rooms = roomsOf(ground, start);
    const count = this.rooms.length;
    this.line = Int32Array.from(this.rooms, (room) => room.line);
    this.length = Int32Array.from(this.rooms, (room) => room.to - room.from);
    this.untilNoon = Int32Array.from(this.rooms, (room) => noonStep - room.from);
    this.used = [new Int32Array(count), new Int32Array(count), new Int32Array(count)];
    this.members = this.rooms.map(() => []);
    this.where = new Int32Array(ground.problem.waiting.length).fill(-1);
    this.option = new Int32Array(ground.problem.waiting.length).fill(-1);
    this.takeOver(start);
  }

  /** First number of a request's offers in a room, and the number after the last. */
  firstOption = (request: number, room: number): number =>
    this.table.first[request * this.table.lines + this.line[room]!]!;
  endOption = (request: number, room: number): number =>
    this.firstOption(request, room) +
    this.table.count[request * this.table.lines + this.line[room]!]!;

  /** Most steps that somebody bound to this part of the day could have in a room beside who is there. */
  freeSteps(part: Part, room: number): number {
    const mornings = this.used[morning][room]!;
    const early = mornings + this.used[anyTime][room]!;
    const late = this.used[afternoon][room]!;
    const noon = this.untilNoon[room]!;
    const length = this.length[room]!;
    if (part === afternoon) return length - Math.max(noon, early) - late;
    const free = length - early - late;
    if (part === anyTime) return free;
    if (mornings === 0) return noon > 0 ? free : 0;
    if (mornings < noon) return free;
    let longest = 0;
    for (const other of this.members[room]!)
      if (this.table.part[other] === morning)
        longest = Math.max(longest, this.table.steps[this.option[other]!]!);
    return Math.min(free, noon - 1 - (mornings - longest));
  }

  canEver(request: number, room: number, option: number): boolean {
    const steps = this.table.steps[option]!;
    const part = this.table.part[request]!;
    if (part === morning && this.untilNoon[room]! <= 0) return false;
    const from = part === afternoon ? Math.max(0, this.untilNoon[room]!) : 0;
    return from + steps <= this.length[room]!;
  }

  /** Puts a request into a room (-1: none) with an offer, wherever it was; it must fit. Remembered until `keep`. */
  put(request: number, room: number, option: number): void {
    this.changed.push(request, this.where[request]!, this.option[request]!);
    this.move(request, room, option);
  }

  keep(): void {
    this.changed.length = 0;
  }

  undo(): void {
    while (this.changed.length > 0) {
      const option = this.changed.pop()!;
      const room = this.changed.pop()!;
      this.move(this.changed.pop()!, room, option);
    }
  }

  private move(request: number, room: number, option: number): void {
    const { steps, value, part } = this.table;
    const used = this.used[part[request] as Part];
    const before = this.where[request]!;
    if (before >= 0) {
      const there = this.members[before]!;
      there[there.indexOf(request)] = there[there.length - 1]!;
      there.pop();
      used[before]! -= steps[this.option[request]!]!;
      this.value -= value[this.option[request]!]!;
    }
    this.where[request] = room;
    this.option[request] = option;
    if (room < 0) return;
    this.members[room]!.push(request);
    used[room]! += steps[option]!;
    this.value += value[option]!;
  }

  private takeOver(board: Board): void {
    this.ground.stretches.forEach((_, s) =>
      board.seatsOf(s).forEach((seat, i) => {
        if (isPinned(this.ground, seat.request)) return;
        const start = board.startsOf(s)[i]!;
        const room = this.rooms.findIndex(
          (x) => x.stretch === s && x.from <= start && start < x.to,
        );
        const option = this.table.options.indexOf(
          seat.option,
          this.firstOption(seat.request, room),
        );
        this.move(seat.request, room, option);
      }),
    );
  }

  /** The same as a board: `where` and `option` as given, the pinned as they were. */
  boardOf(where: ArrayLike<number>, option: ArrayLike<number>): Board {
    const { ground, table, rooms } = this;
    const inRoom: Seat[][] = rooms.map(() => []);
    for (let r = 0; r < where.length; r++) {
      const room = where[r]!;
      if (room < 0) continue;
      const { release, last, factor } = ground.lines[rooms[room]!.line]!.windows[r]!;
      inRoom[room]!.push({
        ...{ request: r, release, last, factor },
        option: table.options[option[r]!]!,
      });
    }
    const turn = [1, 0, 2];
    const coil = (seat: Seat) => ground.problem.waiting[seat.request]!.coil;
    for (const seats of inRoom)
      seats.sort((a, b) => {
        const part = table.part[a.request]!;
        return (
          turn[part]! - turn[table.part[b.request]!]! ||
          (part === morning ? a.option.steps - b.option.steps : 0) ||
          coil(a).localeCompare(coil(b)) ||
          a.request - b.request
        );
      });
    const board = new Board(ground);
    let room = 0;
    ground.stretches.forEach((_, s) => {
      const seats: Seat[] = [];
      for (const seat of this.start.seatsOf(s))
        if (isPinned(ground, seat.request)) seats.push(...inRoom[room++]!, seat);
      seats.push(...inRoom[room++]!);
      if (!board.replace(s, seats)) throw new Error(`a packed stretch does not fit: ${s}`);
    });
    return board;
  }
}
