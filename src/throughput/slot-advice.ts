import { quantileS, type Distribution } from '../planning/index.js';

/** What a slot length means for an exam of a given table time. */
export interface SlotBalance {
  readonly slotMin: number;
  /** Chance to end inside it. */
  readonly chance: number;
  /** Expected minutes past its end, and left over at its end. */
  readonly lateMin: number;
  readonly idleMin: number;
  readonly cost: number;
}

export interface SlotAdvice {
  /** Shortest slot, whole five minutes, with the wished chance to finish. */
  readonly forChanceMin: number;
  /** Slot with the least expected cost, whole five minutes. */
  readonly cheapestMin: number;
  /** The exact optimum: the quantile at late / (late + idle), min. */
  readonly exactMin: number;
  readonly balances: readonly SlotBalance[];
}

export interface AdviceAsked {
  /** Wished chance to finish, 0..1. */
  readonly chance: number;
  /** Cost of a minute late, and of a minute idle, in any one unit. */
  readonly lateCost: number;
  readonly idleCost: number;
}

const stepMin = 5;

/**
 * Slot advice for one table time: the quantile for the wished chance, and the newsvendor's balance of late against idle
 * minutes, P(S <= x) = late / (late + idle) (Weiss 1990 for appointments; Arrow, Harris and Marschak 1951).
 */
export function slotAdvice(tableTime: Distribution, asked: AdviceAsked): SlotAdvice {
  const { chance, lateCost, idleCost } = asked;
  const ceil = (seconds: number) => stepMin * Math.ceil(seconds / 60 / stepMin);
  const lastMin = Math.max(60, ceil(quantileS(tableTime, 0.99)));
  const balances: SlotBalance[] = [];
  for (let slotMin = stepMin; slotMin <= lastMin; slotMin += stepMin)
    balances.push(slotBalance(tableTime, slotMin, asked));
  return {
    forChanceMin: ceil(quantileS(tableTime, chance)),
    cheapestMin: balances.reduce((a, b) => (b.cost < a.cost ? b : a)).slotMin,
    exactMin: quantileS(tableTime, lateCost / (lateCost + idleCost)) / 60,
    balances,
  };
}

/** Expected late and idle minutes of one slot length, exactly over the distribution. */
export function slotBalance(
  { startS, p }: Distribution,
  slotMin: number,
  { lateCost, idleCost }: Pick<AdviceAsked, 'lateCost' | 'idleCost'>,
): SlotBalance {
  const slotS = slotMin * 60;
  let chance = 0;
  let lateS = 0;
  let idleS = 0;
  for (let i = 0; i < p.length; i++) {
    const over = startS + i - slotS;
    if (over <= 0) {
      chance += p[i]!;
      idleS -= over * p[i]!;
    } else lateS += over * p[i]!;
  }
  const lateMin = lateS / 60;
  const idleMin = idleS / 60;
  return { slotMin, chance, lateMin, idleMin, cost: lateCost * lateMin + idleCost * idleMin };
}
