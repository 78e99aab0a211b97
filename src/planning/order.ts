import { ProblemError } from '../shared/index.js';

/** Something that takes the scanner for a while: a sequence or the injection. Seconds throughout. */
export interface OrderItem {
  readonly id: string;
  readonly durationS: number;
  /** Ids that must be run before, where they are present. */
  readonly after: readonly string[];
  /** Marks the injection itself; one at most. */
  readonly injection?: true;
  /** Earliest start after the injection ends; waiting is allowed. */
  readonly earliestAfterInjectionS?: number;
  /** Must start within this after the injection ends (timed phases). */
  readonly latestAfterInjectionS?: number;
}

/** A question is answered when the last item it needs is complete. */
export interface OrderQuestion {
  readonly id: string;
  readonly value: number;
  readonly needs: readonly string[];
}

export interface RunningOrder {
  readonly ids: readonly string[];
  /** Start of each, seconds since entry. */
  readonly startsS: readonly number[];
  /** When the last one ends, seconds since entry. */
  readonly endS: number;
  /** Sum over questions of value times P(still in the scanner when it is answered). */
  readonly expectedValue: number;
}

export interface OrderInput {
  readonly items: readonly OrderItem[];
  readonly questions: readonly OrderQuestion[];
  /** P(still in the scanner at t seconds since entry); must not rise with t. */
  readonly survival: (tS: number) => number;
  readonly startS: number;
}

/** 2^16 subsets are the most that stay within memory and a second or so. */
const mostItems = 16;

/** One way to have run a subset: what it has brought, when it ended, when the injection ended. */
interface Label {
  readonly value: number;
  readonly endS: number;
  /** Undefined until injected. */
  readonly injectedS: number | undefined;
  readonly last: number;
  readonly startS: number;
  readonly before: Label | undefined;
}

/**
 * The order with the highest expected value of answers, exact: dynamic programme over subsets (Held and Karp
 * 1962). The time a subset takes is known from the subset alone unless phases wait for contrast; so
 * each subset keeps every way to reach it that none beats in value, injection time and time since the
 * injection together. Equal values: the earlier end, then the alphabetical order of ids. With one question per item and a
 * constant hazard this is the index order of Rothkopf 1966. Phase limits count only when the injection is among the
 * items. Questions that need something absent bring nothing.
 * @returns undefined when no order respects precedence and timing
 * @throws ProblemError for more than 16 items, a repeated id, a second injection
 */
export function bestOrder(input: OrderInput): RunningOrder | undefined {
  const items = [...input.items].sort((a, b) => (a.id < b.id ? -1 : a.id > b.id ? 1 : 0));
  refuseUnusable(items);
  const count = items.length;
  const full = 2 ** count - 1;
  const bitOf = new Map(items.map(({ id }, i) => [id, 1 << i]));
  const injection = items.findIndex((item) => item.injection === true);
  const firsts = items.map((item) => mustPrecede(item, bitOf, injection));
  const answers = answerTable(input, bitOf, count);
  const atStart = input.questions
    .filter(({ needs }) => needs.length === 0)
    .reduce((sum, { value }) => sum + value * input.survival(input.startS), 0);

  const reached: (Label[] | undefined)[] = new Array<Label[] | undefined>(full + 1);
  reached[0] = [
    {
      value: atStart,
      endS: input.startS,
      injectedS: undefined,
      last: -1,
      startS: 0,
      before: undefined,
    },
  ];
  for (let done = 0; done < full; done++) {
    const labels = reached[done];
    if (labels === undefined) continue;
    reached[done] = undefined;
    for (let i = 0; i < count; i++) {
      const bit = 1 << i;
      if ((done & bit) !== 0 || (firsts[i]! & ~done) !== 0) continue;
      const after = done | bit;
      for (const label of labels) {
        const startS = startOf(items[i]!, label);
        if (startS === undefined) continue;
        const endS = startS + items[i]!.durationS;
        let gain = 0;
        for (const answer of answers[i]!) {
          if ((answer.needs & ~after) === 0) gain += answer.value;
        }
        const next: Label = {
          value: gain === 0 ? label.value : label.value + gain * input.survival(endS),
          endS,
          injectedS: i === injection ? endS : label.injectedS,
          last: i,
          startS,
          before: label,
        };
        keep((reached[after] ??= []), next);
      }
    }
  }
  const best = (reached[full] ?? []).reduce<Label | undefined>(
    (a, b) => (a === undefined || prefers(b, a) ? b : a),
    undefined,
  );
  return best === undefined ? undefined : unrolled(best, items);
}

function startOf(item: OrderItem, label: Label): number | undefined {
  const { injectedS, endS } = label;
  if (injectedS === undefined) return endS;
  const startS = Math.max(endS, injectedS + (item.earliestAfterInjectionS ?? 0));
  return startS > injectedS + (item.latestAfterInjectionS ?? Infinity) ? undefined : startS;
}

/** Adds a label unless another is at least as good in everything that can matter later. */
function keep(labels: Label[], next: Label): void {
  for (const old of labels) if (covers(old, next)) return;
  let kept = 0;
  for (const old of labels) if (!covers(next, old)) labels[kept++] = old;
  labels.length = kept;
  labels.push(next);
}

/**
 * `a` can do whatever `b` can, no later and for no less: it was injected no later, has
 * spent no more since, and has brought no less. In a tie only the preferred order covers the other.
 */
function covers(a: Label, b: Label): boolean {
  const injectedA = a.injectedS ?? a.endS;
  const injectedB = b.injectedS ?? b.endS;
  if (injectedA > injectedB || a.endS - injectedA > b.endS - injectedB) return false;
  const gap = a.value - b.value;
  const slack = 1e-12 * Math.abs(a.value);
  if (Math.abs(gap) > slack) return gap > 0;
  return injectedA < injectedB || a.endS < b.endS || comesFirst(a, b);
}

function prefers(a: Label, b: Label): boolean {
  const gap = a.value - b.value;
  if (Math.abs(gap) > 1e-12 * Math.abs(a.value)) return gap > 0;
  return a.endS === b.endS ? comesFirst(a, b) : a.endS < b.endS;
}

/** Alphabetical on the two orders; items are sorted by id. */
function comesFirst(a: Label, b: Label): boolean {
  let first = true;
  let x: Label | undefined = a;
  let y: Label | undefined = b;
  while (x !== undefined && y !== undefined && x !== y) {
    if (x.last !== y.last) first = x.last < y.last;
    x = x.before;
    y = y.before;
  }
  return first;
}

function mustPrecede(
  item: OrderItem,
  bitOf: ReadonlyMap<string, number>,
  injection: number,
): number {
  const timed =
    item.earliestAfterInjectionS !== undefined || item.latestAfterInjectionS !== undefined;
  const contrast = timed && injection >= 0 ? 1 << injection : 0;
  return item.after.reduce((mask, id) => mask | (bitOf.get(id) ?? 0), contrast);
}

/** Per item, the questions that its completion can answer, with the mask of all they need. */
function answerTable(
  input: OrderInput,
  bitOf: ReadonlyMap<string, number>,
  count: number,
): { readonly needs: number; readonly value: number }[][] {
  const table = Array.from({ length: count }, () => [] as { needs: number; value: number }[]);
  for (const { needs, value } of input.questions) {
    if (!needs.every((id) => bitOf.has(id))) continue;
    const mask = needs.reduce((sum, id) => sum | bitOf.get(id)!, 0);
    for (let i = 0; i < count; i++)
      if ((mask & (1 << i)) !== 0) table[i]!.push({ needs: mask, value });
  }
  return table;
}

function unrolled(best: Label, items: readonly OrderItem[]): RunningOrder {
  const ids: string[] = [];
  const startsS: number[] = [];
  for (let at: Label | undefined = best; at?.before !== undefined; at = at.before) {
    ids.unshift(items[at.last]!.id);
    startsS.unshift(at.startS);
  }
  return { ids, startsS, endS: best.endS, expectedValue: best.value };
}

function refuseUnusable(items: readonly OrderItem[]): void {
  const refuse = (code: string, value: string, limit: string, wayOut: string): never => {
    throw new ProblemError({ code, thing: 'running order', value, limit, wayOut });
  };
  if (items.length > mostItems) {
    refuse(
      'too-many-items-to-order',
      `${items.length} items`,
      `at most ${mostItems} can be ordered exactly`,
      'Order a part of the exam at a time, or split it over two visits.',
    );
  }
  const twice = items.find(({ id }, i) => items[i + 1]?.id === id);
  if (twice !== undefined) {
    refuse('repeated-id', twice.id, 'each id once', 'Give every item an id of its own.');
  }
  if (items.filter((item) => item.injection === true).length > 1) {
    refuse('second-injection', 'two injections', 'one at most', 'Plan one injection per exam.');
  }
}
