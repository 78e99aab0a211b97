/** What happens next: numbers by the minute they fall due, earliest first; among equals the lowest number. Binary heap. */
export class TimeHeap {
  private times: Float64Array;
  private items: Int32Array;
  private size = 0;

  constructor(capacity: number) {
    this.times = new Float64Array(Math.max(8, capacity));
    this.items = new Int32Array(Math.max(8, capacity));
  }

  /** Minute of the earliest; Infinity when there is none. */
  get nextMin(): number {
    return this.size === 0 ? Infinity : this.times[0]!;
  }

  push(minute: number, item: number): void {
    if (this.size === this.times.length) this.grow();
    let i = this.size;
    this.size += 1;
    while (i > 0) {
      const parent = (i - 1) >> 1;
      if (!this.before(minute, item, parent)) break;
      this.times[i] = this.times[parent]!;
      this.items[i] = this.items[parent]!;
      i = parent;
    }
    this.times[i] = minute;
    this.items[i] = item;
  }

  /** Takes the earliest out; -1 when there is none. */
  pop(): number {
    if (this.size === 0) return -1;
    const first = this.items[0]!;
    this.size -= 1;
    const minute = this.times[this.size]!;
    const item = this.items[this.size]!;
    let i = 0;
    for (;;) {
      let child = 2 * i + 1;
      if (child >= this.size) break;
      if (
        child + 1 < this.size &&
        this.before(this.times[child + 1]!, this.items[child + 1]!, child)
      )
        child += 1;
      if (this.before(minute, item, child)) break;
      this.times[i] = this.times[child]!;
      this.items[i] = this.items[child]!;
      i = child;
    }
    this.times[i] = minute;
    this.items[i] = item;
    return first;
  }

  private before(minute: number, item: number, other: number): boolean {
    return (
      minute < this.times[other]! || (minute === this.times[other]! && item < this.items[other]!)
    );
  }

  private grow(): void {
    const times = new Float64Array(2 * this.times.length);
    const items = new Int32Array(2 * this.items.length);
    times.set(this.times);
    items.set(this.items);
    this.times = times;
    this.items = items;
  }
}
