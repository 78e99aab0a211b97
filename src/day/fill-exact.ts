import { Board } from './fill-board.js';
import { compareFills, type FillObjective } from './fill-objective.js';
import { priorityWorth, type Ground, type SlotOption } from './fill-problem.js';

export interface ExactFill {
  readonly best: Board;
  readonly objective: FillObjective;
  /** False when the node budget ran out: then it is only the best seen. */
  readonly proved: boolean;
  readonly nodes: number;
}

interface Chance {
  readonly answers: number;
  readonly option: SlotOption;
  readonly waiting: number;
}

/**
 * Branch and bound over insertions: requests in turn, each left out or put into every position of every stretch with every
 * offer. Because an objective only gets worse in overruns, coils and waiting when somebody is added, a branch ends when
 * what is left cannot win enough answers, or can only tie them and has already lost the later tiers.
 * A team ties stretches to each other, so requests that need one are not for this method.
 */
export function fillExactly(
  ground: Ground,
  start: Board,
  nodeBudget = 200_000,
): ExactFill | undefined {
  const { waiting } = ground.problem;
  if (waiting.some((r) => r.team !== undefined)) return undefined;
  const big = 1 + totalOf(ground);
  // Exact as long as three tiers fit into 53 bits.
  if (big > 2 ** 17) return undefined;
  const answersOf = (o: FillObjective) => (o.diagnostic * big + o.targeted) * big + o.screening;
  const chances = waiting.map((_, r) => chancesOf(ground, r, big));
  const top = chances.map((list) => list.reduce((m, c) => Math.max(m, c.answers), 0));
  const order = waiting.map((_, r) => r).sort((a, b) => top[b]! - top[a]!);
  const frees = ground.stretches.reduce((sum, s) => sum + s.to - s.from, 0);
  const hulls = order.map((r) => hullOf(chances[r]!));

  let best = start.copy();
  let objective = start.objective();
  let nodes = 0;
  let free = frees;
  const board = new Board(ground);

  const cannotWin = (depth: number, now: FillObjective): boolean => {
    const goal = answersOf(objective);
    const have = answersOf(now);
    let left = 0;
    for (let d = depth; d < order.length; d++) left += top[order[d]!]!;
    if (have + left < goal) return true;
    if (have + fractional(hulls, depth, free) < goal * (1 - 1e-12)) return true;
    // Only a tie or more is left to win: what must still be placed for it brings at least this much of the later tiers.
    let overrun = now.overrunPercent;
    let later = now.waiting;
    let surplus = false;
    const spare = have + left - goal;
    if (spare > 0) surplus = true;
    for (let d = depth; d < order.length; d++) {
      const r = order[d]!;
      const needed = top[r]! - spare;
      if (needed <= 0) continue;
      let leastOverrun = Infinity;
      let leastWaiting = Infinity;
      for (const c of chances[r]!) {
        if (c.answers < needed) continue;
        leastOverrun = Math.min(leastOverrun, c.option.overrun);
        leastWaiting = Math.min(leastWaiting, c.waiting);
      }
      if (leastOverrun === Infinity) return true;
      overrun += leastOverrun;
      later += leastWaiting;
    }
    if (surplus && have + fractional(hulls, depth, free) >= goal + 0.5) return false;
    const atBest: FillObjective = {
      ...objective,
      overrunPercent: overrun,
      coilChanges: now.coilChanges,
      waiting: later,
    };
    return compareFills(atBest, objective) <= 0;
  };

  const descend = (depth: number): boolean => {
    if (++nodes > nodeBudget) return false;
    const now = board.objective();
    if (depth === order.length) {
      if (compareFills(now, objective) > 0) {
        best = board.copy();
        objective = now;
      }
      return true;
    }
    if (cannotWin(depth, now)) return true;
    const r = order[depth]!;
    const spots: Parameters<Parameters<Board['eachSpot']>[1]>[0][] = [];
    board.eachSpot(r, (spot) => spots.push(spot));
    spots.sort((a, b) => b.option.diagnostic - a.option.diagnostic || a.start - b.start);
    for (const spot of spots) {
      const before = board.seatsOf(spot.stretch);
      if (!board.put(r, spot)) continue;
      free -= spot.option.steps;
      const whole = descend(depth + 1);
      free += spot.option.steps;
      board.replace(spot.stretch, before);
      if (!whole) return false;
    }
    return descend(depth + 1);
  };
  const proved = descend(0);
  return { best, objective, proved, nodes };
}

function totalOf(ground: Ground): number {
  return ground.problem.waiting.reduce((sum, _, r) => {
    let top = 0;
    for (const line of ground.lines)
      for (const o of line.windows[r]?.options ?? [])
        top = Math.max(top, line.windows[r]!.factor * o.screening);
    return sum + top;
  }, 0);
}

/** Every offer on every line with its answers as one number and the least waiting it could have. */
function chancesOf(ground: Ground, r: number, big: number): readonly Chance[] {
  const worth = priorityWorth[ground.problem.waiting[r]!.priority];
  return ground.stretches.flatMap((stretch) => {
    const line = ground.lines[stretch.line]!;
    const w = line.windows[r];
    if (w === undefined) return [];
    const start = Math.max(stretch.from, w.release);
    return w.options.flatMap((option): Chance[] =>
      start > w.last || start + option.steps > stretch.to
        ? []
        : [
            {
              option,
              answers:
                w.factor * ((option.diagnostic * big + option.targeted) * big + option.screening),
              waiting: worth * (line.dayIndex * 288 + start),
            },
          ],
    );
  });
}

interface Increment {
  readonly steps: number;
  readonly gain: number;
}

/** Upper hull of answers over steps: increments of falling gain per step. */
function hullOf(chances: readonly Chance[]): readonly Increment[] {
  const points = [{ steps: 0, gain: 0 }];
  const sorted = chances
    .map((c) => ({ steps: c.option.steps, gain: c.answers }))
    .sort((a, b) => a.steps - b.steps || b.gain - a.gain);
  for (const p of sorted) {
    if (p.gain <= points.at(-1)!.gain) continue;
    while (points.length > 1) {
      const b = points.at(-1)!;
      const a = points.at(-2)!;
      if ((b.gain - a.gain) * (p.steps - b.steps) > (p.gain - b.gain) * (b.steps - a.steps)) break;
      points.pop();
    }
    points.push(p);
  }
  return points
    .slice(1)
    .map((p, i) => ({ steps: p.steps - points[i]!.steps, gain: p.gain - points[i]!.gain }));
}

/** Most answers of the requests from `depth` on in this many free steps, cut anywhere: the knapsack bound of Dantzig 1957. */
function fractional(hulls: readonly (readonly Increment[])[], depth: number, free: number): number {
  const increments = hulls
    .slice(depth)
    .flat()
    .sort((a, b) => b.gain / b.steps - a.gain / a.steps);
  let room = free;
  let gain = 0;
  for (const i of increments) {
    if (i.steps >= room) return gain + (i.gain * room) / i.steps;
    gain += i.gain;
    room -= i.steps;
  }
  return gain;
}
