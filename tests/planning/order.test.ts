import { describe, expect, it } from 'vitest';
import {
  bestOrder,
  type OrderInput,
  type OrderItem,
  type OrderQuestion,
} from '../../src/planning/order.js';
import { stream } from './instances.js';

const hazard = (perS: number) => (tS: number) => Math.exp(-perS * tS);
const job = (id: string, durationS: number): OrderItem => ({ id, durationS, after: [] });
const asked = (id: string, value: number): OrderQuestion => ({ id, value, needs: [id] });

/** Best of all orders, earliest starts; written from the definition, apart from the code under test. */
function bestByTryingAll(input: OrderInput): { value: number; feasible: boolean } {
  let best = -Infinity;
  const present = new Set(input.items.map((i) => i.id));
  const injected = input.items.some((i) => i.injection);
  const walk = (left: OrderItem[], done: string[], timeS: number, injS: number, value: number) => {
    if (left.length === 0) best = Math.max(best, value);
    for (const item of left) {
      if (item.after.some((id) => present.has(id) && !done.includes(id))) continue;
      const { earliestAfterInjectionS: early, latestAfterInjectionS: late } = item;
      let startS = timeS;
      if (injected && (early !== undefined || late !== undefined)) {
        if (injS === Infinity) continue;
        startS = Math.max(timeS, injS + (early ?? 0));
        if (startS > injS + (late ?? Infinity)) continue;
      }
      const endS = startS + item.durationS;
      const now = [...done, item.id];
      const gain = input.questions
        .filter((q) => q.needs.includes(item.id) && q.needs.every((id) => now.includes(id)))
        .reduce((sum, q) => sum + q.value, 0);
      const rest = left.filter((other) => other !== item);
      walk(rest, now, endS, item.injection ? endS : injS, value + gain * input.survival(endS));
    }
  };
  walk([...input.items], [], input.startS, Infinity, 0);
  return { value: best, feasible: best > -Infinity };
}

describe('running order', () => {
  // Source: T8 of the checks, Rothkopf 1966 against Smith 1956; value derived there as best of 6.
  it('follows the index of Rothkopf 1966 where that of Smith 1956 disagrees', () => {
    const order = bestOrder({
      items: [job('A', 1), job('B', 10), job('C', 4)],
      questions: [asked('A', 1), asked('B', 11), asked('C', 4)],
      survival: hazard(0.1),
      startS: 0,
    });
    expect(order?.ids).toEqual(['A', 'C', 'B']);
    expect(order?.expectedValue).toBeCloseTo(5.7854, 4);
  });

  // Source: T9 of the checks: indices 118.0, 116.0, 63.1, 49.6; the localiser is a precedence constraint.
  it('orders sequences by that index when the patient may give up, localiser first', () => {
    const all = ['dwi', 'flair', 'fse', 'single-shot'];
    const order = bestOrder({
      items: [
        { id: 'flair', durationS: 300, after: ['localiser'] },
        { id: 'fse', durationS: 240, after: ['localiser'] },
        { id: 'dwi', durationS: 120, after: ['localiser'] },
        { id: 'single-shot', durationS: 60, after: ['localiser'] },
        job('localiser', 30),
      ],
      questions: [asked('flair', 9), asked('fse', 9), asked('dwi', 8), asked('single-shot', 4)],
      survival: hazard(1 / 1800),
      startS: 0,
    });
    expect(order?.ids).toEqual(['localiser', 'single-shot', 'dwi', 'fse', 'flair']);
    expect(order?.startsS).toEqual([0, 30, 90, 210, 450]);
    expect(order?.endS).toBe(750);
    expect(all.every((id) => order?.ids.includes(id))).toBe(true);
  });

  // Source: Rothkopf 1966, index w exp(-rp) / (1 - exp(-rp)), on generated jobs.
  it('is the index order for any jobs with one question each and constant hazard', () => {
    const random = stream('rothkopf', 3);
    for (let run = 0; run < 30; run++) {
      const rate = 0.0002 + 0.002 * random();
      const jobs = Array.from({ length: 9 }, (_, i) => ({
        id: `j${i}`,
        p: 30 + Math.floor(400 * random()),
        w: 1 + Math.floor(9 * random()),
      }));
      const index = ({ p, w }: { p: number; w: number }) =>
        (w * Math.exp(-rate * p)) / -Math.expm1(-rate * p);
      const byIndex = [...jobs].sort((a, b) => index(b) - index(a));
      let t = 0;
      const value = byIndex.reduce((sum, j) => sum + j.w * Math.exp(-rate * (t += j.p)), 0);
      const order = bestOrder({
        items: jobs.map((j) => job(j.id, j.p)),
        questions: jobs.map((j) => asked(j.id, j.w)),
        survival: hazard(rate),
        startS: 0,
      });
      expect(order?.expectedValue).toBeCloseTo(value, 9);
    }
  });

  // Source: exhaustive search.
  it('equals the best of all orders with precedence, shared needs and timed phases after injection', () => {
    const random = stream('orders', 7);
    let impossible = 0;
    for (let run = 0; run < 250; run++) {
      const count = 3 + Math.floor(random() * 5);
      const ids = Array.from({ length: count }, (_, i) => `s${i}`);
      const withInjection = random() < 0.75;
      const items: OrderItem[] = ids.map((id, i) => {
        const timed = withInjection && random() < 0.45;
        const earliest = Math.floor(random() * 400);
        return {
          id,
          durationS: 20 + Math.floor(random() * 300),
          after: i > 0 && random() < 0.3 ? [ids[Math.floor(random() * i)]!] : [],
          ...(timed ? { earliestAfterInjectionS: earliest } : {}),
          ...(timed && random() < 0.6
            ? { latestAfterInjectionS: earliest + Math.floor(random() * 200) }
            : {}),
        };
      });
      if (withInjection) {
        // Replaces the last so that there are at most seven.
        items[count - 1] = { id: 'contrast', durationS: 60, after: [], injection: true };
      }
      const questions = Array.from({ length: 4 }, (_, q) => ({
        id: `q${q}`,
        value: 1 + Math.floor(random() * 9),
        needs: [
          ...new Set([
            ids[Math.floor(random() * (count - 1))]!,
            ids[Math.floor(random() * (count - 1))]!,
          ]),
        ],
      }));
      const shape = 0.7 + random();
      const input = {
        items,
        questions,
        survival: (tS: number) => Math.exp(-((tS / 1500) ** shape)),
        startS: 45,
      };
      const expected = bestByTryingAll(input);
      const order = bestOrder(input);
      expect(order !== undefined).toBe(expected.feasible);
      if (order === undefined) impossible++;
      else expect(order.expectedValue).toBeCloseTo(expected.value, 10);
    }
    expect(impossible).toBeGreaterThan(0);
  });

  // Source: by hand.
  it('fills the wait after the injection, and waits when there is nothing left to fill it with', () => {
    const order = bestOrder({
      items: [
        { id: 'contrast', durationS: 60, after: ['before'], injection: true },
        job('before', 100),
        job('filler', 120),
        {
          id: 'late',
          durationS: 80,
          after: ['contrast'],
          earliestAfterInjectionS: 300,
          latestAfterInjectionS: 330,
        },
      ],
      questions: [asked('late', 5), asked('filler', 1), asked('before', 1)],
      survival: hazard(1 / 1000),
      startS: 0,
    });
    expect(order?.ids).toEqual(['before', 'contrast', 'filler', 'late']);
    expect(order?.startsS).toEqual([0, 100, 160, 460]);
  });

  // Source: house rule that results do not hang on the order of input.
  it('breaks ties by id, whatever order the items come in', () => {
    const items = ['d', 'b', 'a', 'c'].map((id) => job(id, 60));
    const questions = items.map(({ id }) => asked(id, 2));
    const input = { questions, survival: hazard(0.001), startS: 0 };
    expect(bestOrder({ ...input, items })?.ids).toEqual(['a', 'b', 'c', 'd']);
    expect(bestOrder({ ...input, items: [...items].reverse() })?.ids).toEqual(['a', 'b', 'c', 'd']);
  });

  // Source: definition.
  it('says when no order respects precedence or timing', () => {
    const input = { questions: [], survival: () => 1, startS: 0 };
    const circle = [
      { id: 'a', durationS: 1, after: ['b'] },
      { id: 'b', durationS: 1, after: ['a'] },
    ];
    expect(bestOrder({ ...input, items: circle })).toBeUndefined();
    const rivals: OrderItem[] = ['x', 'y'].map((id) => ({
      id,
      durationS: 60,
      after: [],
      latestAfterInjectionS: 10,
    }));
    const contrast: OrderItem = { id: 'c', durationS: 30, after: [], injection: true };
    expect(bestOrder({ ...input, items: [contrast, ...rivals] })).toBeUndefined();
    expect(bestOrder({ ...input, items: rivals })).toBeDefined();
    expect(bestOrder({ ...input, items: [] })).toEqual({
      ids: [],
      startsS: [],
      endS: 0,
      expectedValue: 0,
    });
  });

  it('refuses more than sixteen items, repeated ids and two injections', () => {
    const input = { questions: [], survival: () => 1, startS: 0 };
    const many = Array.from({ length: 17 }, (_, i) => job(`i${i}`, 1));
    expect(() => bestOrder({ ...input, items: many })).toThrow(/at most 16/);
    expect(() => bestOrder({ ...input, items: [job('a', 1), job('a', 2)] })).toThrow(
      /each id once/,
    );
    const twice: OrderItem[] = ['a', 'b'].map((id) => ({ ...job(id, 1), injection: true }));
    expect(() => bestOrder({ ...input, items: twice })).toThrow(/one at most/);
  });

  // Source: common practice, no source; a wide allowance for a busy machine.
  it('orders fourteen items with timed phases in well under two seconds', () => {
    const random = stream('fourteen', 1);
    const items: OrderItem[] = Array.from({ length: 13 }, (_, i) => ({
      ...job(`i${i}`, 30 + Math.floor(200 * random())),
      ...(i % 3 === 0 ? { earliestAfterInjectionS: 60 * i } : {}),
    }));
    items.push({ id: 'contrast', durationS: 60, after: [], injection: true });
    const questions = items.slice(0, 13).map(({ id }) => asked(id, 1 + Math.floor(8 * random())));
    const beganMs = performance.now();
    const order = bestOrder({ items, questions, survival: hazard(1 / 1500), startS: 0 });
    expect(order?.ids).toHaveLength(14);
    expect(performance.now() - beganMs).toBeLessThan(2_000);
  });
});
