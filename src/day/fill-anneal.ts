import type { Board } from './fill-board.js';
import { drawFrom, drawOne, type Draw, type Prices } from './fill-draw.js';
import { Packing } from './fill-packing.js';
import type { Part } from './fill-rooms.js';

/** Odds that a place is passed over when somebody is put back. */
const blink = 0.05;
/** Loss against the prices at which a place is drawn e times less often, in mean worths of a request. */
const lossShare = 0.03;

/**
 * Simulated annealing (Kirkpatrick and others 1983) over packings, each step a small ruin and recreate (Schrimpf and others
 * 2000): somebody is forced in where the prices say it pays, or some are taken out; those put out are offered every room,
 * those who wait the rooms that changed.
 */
export class Anneal {
  private readonly packing: Packing;
  private readonly draw: Draw;
  private readonly roomPrices: Float64Array;
  /** Rooms in which each request has offers. */
  private readonly roomsFor: readonly (readonly number[])[];
  private readonly scale: number;
  private readonly best: { value: number; where: Int32Array; option: Int32Array };
  private readonly touched: number[] = [];
  private readonly isTouched: Uint8Array;
  private readonly isOut: Uint8Array;
  private readonly key: Float64Array;
  private readonly waiting: number[] = [];
  private foundValue = 0;

  /** @param scale worth of a request, about: the unit of warmth */
  constructor(
    start: Board,
    private readonly prices: Prices,
    scale: number,
    private readonly random: () => number,
  ) {
    const packing = new Packing(start.ground, start);
    this.packing = packing;
    this.scale = scale;
    this.draw = drawFrom(packing, prices, lossShare * scale);
    this.roomPrices = Float64Array.from(packing.rooms, (m) => prices.stepPrices[m.stretch]!);
    this.roomsFor = Array.from(packing.where, (_, r) =>
      packing.rooms.flatMap((_, m) =>
        packing.firstOption(r, m) < packing.endOption(r, m) ? [m] : [],
      ),
    );
    this.isTouched = new Uint8Array(packing.rooms.length);
    this.isOut = new Uint8Array(packing.where.length);
    this.key = new Float64Array(packing.where.length);
    this.best = {
      value: packing.value,
      where: Int32Array.from(packing.where),
      option: Int32Array.from(packing.option),
    };
  }

  /** Steps at one warmth, in mean worths of a request. */
  step(many: number, warmth: number): void {
    const { packing, random, best } = this;
    for (let i = 0; i < many; i++) {
      const before = packing.value;
      this.forget();
      if (random() < 0.5) this.takeSome();
      else this.forceOne();
      this.putBack();
      this.lengthen();
      if (packing.value < before + warmth * this.scale * Math.log(1 - random())) packing.undo();
      else {
        packing.keep();
        if (packing.value > best.value + 1e-9) {
          best.value = packing.value;
          best.where.set(packing.where);
          best.option.set(packing.option);
        }
      }
    }
  }

  /** The best so far as a board. */
  bestBoard = (): Board => this.packing.boardOf(this.best.where, this.best.option);

  private forget(): void {
    for (const room of this.touched) this.isTouched[room] = 0;
    this.touched.length = 0;
    this.isOut.fill(0);
  }

  private touch(room: number): void {
    if (room < 0 || this.isTouched[room] === 1) return;
    this.isTouched[room] = 1;
    this.touched.push(room);
  }

  private takeOne(room: number): void {
    const there = this.packing.members[room]!;
    const request = there[Math.floor(this.random() * there.length)]!;
    this.isOut[request] = 1;
    this.packing.put(request, -1, -1);
  }

  private takeSome(): void {
    const { packing, random } = this;
    const many = 1 + Math.floor(random() * 2);
    for (let i = 0; i < many; i++) {
      const room = Math.floor(random() * packing.rooms.length);
      this.touch(room);
      for (let k = Math.floor(random() * 3); k >= 0 && packing.members[room]!.length > 0; k--)
        this.takeOne(room);
    }
  }

  private forceOne(): void {
    const { packing, draw, random } = this;
    const { steps, part, value } = packing.table;
    for (let tries = 0; tries < 8; tries++) {
      const n = drawOne(draw, random);
      if (n < 0) return;
      const request = draw.request[n]!;
      const room = draw.room[n]!;
      const option = draw.option[n]!;
      const from = packing.where[request]!;
      if (from === room && packing.option[request] === option) continue;
      const worse = from >= 0 && value[option]! <= value[packing.option[request]!]!;
      if (worse && random() < 0.5) continue;
      this.touch(room);
      if (from >= 0) {
        this.touch(from);
        packing.put(request, -1, -1);
      }
      const own = part[request] as Part;
      while (packing.freeSteps(own, room) < steps[option]! && packing.members[room]!.length > 0)
        this.takeOne(room);
      packing.put(request, room, option);
      return;
    }
  }

  /** Those who wait in a random kind of order, each where it is worth most beyond the price of its time. */
  private putBack(): void {
    const { packing, random, waiting, key, isOut } = this;
    const kind = Math.floor(random() * 3);
    waiting.length = 0;
    for (let r = 0; r < packing.where.length; r++) {
      if (packing.where[r]! >= 0) continue;
      waiting.push(r);
      key[r] = kind === 0 ? random() : this.prices.requestPrices[r]! * (0.8 + 0.4 * random());
    }
    waiting.sort((a, b) => key[b]! - key[a]!);
    const level = random() < 0.2 ? 0 : 0.5 + random();
    for (const r of waiting) {
      let room = -1;
      let option = -1;
      let most = -Infinity;
      for (const m of isOut[r] === 1 ? this.roomsFor[r]! : this.touched) {
        if (random() < blink) continue;
        const found = this.bestOption(r, m, level, most);
        if (found < 0) continue;
        option = found;
        room = m;
        most = this.foundValue;
      }
      if (room < 0) continue;
      packing.put(r, room, option);
      this.touch(room);
    }
  }

  /** The best offer that fits and is worth more than `least` beyond the price of its time; -1 when there is none. */
  private bestOption(request: number, room: number, level: number, least: number): number {
    const { packing } = this;
    const { steps, value, part } = packing.table;
    const end = packing.endOption(request, room);
    let o = packing.firstOption(request, room);
    if (o === end) return -1;
    const free = packing.freeSteps(part[request] as Part, room);
    const price = level * this.roomPrices[room]!;
    let best = -1;
    this.foundValue = least;
    for (; o < end && steps[o]! <= free; o++) {
      const own = value[o]! - price * steps[o]!;
      if (own > this.foundValue) {
        this.foundValue = own;
        best = o;
      }
    }
    return best;
  }

  private lengthen(): void {
    const { packing } = this;
    for (const room of this.touched)
      for (const r of [...packing.members[room]!]) {
        const now = packing.option[r]!;
        if (now + 1 >= packing.endOption(r, room)) continue;
        packing.put(r, -1, -1);
        const better = this.bestOption(r, room, 0, packing.table.value[now]!);
        packing.put(r, room, better >= 0 ? better : now);
      }
  }
}
