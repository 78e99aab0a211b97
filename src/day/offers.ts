import { gradeOf, gradeWords } from '../exams/index.js';
import {
  prepare,
  type ExamRequest,
  type PlanningGround,
  type Prepared,
} from '../planning/index.js';
import type { ScannerAbilities } from '../sequences/index.js';
import { sayProblem } from '../shared/index.js';

/** What a slot of one length gets a request on one scanner. Sums of question weights, as in the choice of one exam. */
export interface Offer {
  /** Whole minutes, a multiple of 5. */
  readonly slotMin: number;
  /** Weights of questions answered diagnostically. */
  readonly diagnostic: number;
  /** Weights of questions answered as targeted or better. */
  readonly targeted: number;
  /** Weights of questions answered at screening grade or better. */
  readonly screening: number;
  /** Chance to end inside the slot. */
  readonly chance: number;
  /** Per question, never without the words that must stand beside a grade. */
  readonly words: string;
}

/** Offers per scanner id, shortest slot first; or, for a scanner that cannot take it, why. */
export interface RequestOffers {
  readonly offers: ReadonlyMap<string, readonly Offer[]>;
  readonly cannot: ReadonlyMap<string, string>;
}

/** The part of a choice that an offer needs. */
interface ChosenAnswer {
  readonly ranks: readonly (0 | 1 | 2 | 3)[];
  readonly objective: {
    readonly diagnostic: number;
    readonly targeted: number;
    readonly screening: number;
  };
  readonly chance: number;
}

/** Best choice at each slot length: the exact branch and bound along the curve. */
export type ChooseAlong = (
  problem: Prepared['problem'],
  slotsS: readonly number[],
) => readonly ChosenAnswer[];

/** Slot lengths looked at unless others are given, minutes. */
export const offeredSlotsMin: readonly number[] = [10, 15, 20, 25, 30, 35, 40, 45, 50, 60, 75, 90];

/**
 * What each scanner can offer a request along a few slot lengths. A slot in which nothing would be answered is no offer; of
 * slots with the same answers and chance the shortest is kept.
 */
export function offersFor(
  request: ExamRequest,
  scanners: readonly ScannerAbilities[],
  ground: PlanningGround,
  choose: ChooseAlong,
  slotsMin: readonly number[] = offeredSlotsMin,
): RequestOffers {
  const offers = new Map<string, readonly Offer[]>();
  const cannot = new Map<string, string>();
  for (const scanner of scanners) {
    const ready = prepare(request, scanner, ground);
    if (ready.kind === 'refused') {
      cannot.set(scanner.id, ready.problems.map(sayProblem).join(' '));
      continue;
    }
    const choices = choose(
      ready.value.problem,
      slotsMin.map((m) => m * 60),
    );
    const found = slotsMin.flatMap((slotMin, n): Offer[] => {
      const choice = choices[n];
      if (choice === undefined || choice.objective.screening === 0) return [];
      const { diagnostic, targeted, screening } = choice.objective;
      const words = ready.value.questions
        .map((q, i) => `${q.name}: ${gradeWords[gradeOf(choice.ranks[i] ?? 0)]}`)
        .join('; ');
      return [{ slotMin, diagnostic, targeted, screening, chance: choice.chance, words }];
    });
    if (found.length === 0) {
      cannot.set(
        scanner.id,
        `no slot of ${slotsMin[0] ?? 0} to ${slotsMin.at(-1) ?? 0} minutes answers anything there`,
      );
    } else offers.set(scanner.id, undominated(found));
  }
  return { offers, cannot };
}

/** Without offers that take as long as another or longer and are better in nothing. */
export function undominated(offers: readonly Offer[]): readonly Offer[] {
  const sorted = [...offers].sort((a, b) => a.slotMin - b.slotMin);
  return sorted.filter(
    (offer, n) =>
      !sorted.some(
        (other, m) =>
          m < n &&
          other.diagnostic >= offer.diagnostic &&
          other.targeted >= offer.targeted &&
          other.screening >= offer.screening &&
          overrunPercent(other) <= overrunPercent(offer),
      ),
  );
}

/** Chance of overrun, whole percent: finer differences do not decide between places. */
export const overrunPercent = (offer: Offer): number => Math.round(100 * (1 - offer.chance));
