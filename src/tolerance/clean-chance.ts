import { gradeAtLeast, type GradeFactor, type SitePolicy } from '../exams/index.js';
import type { ScanTime, Sequence } from '../sequences/index.js';
import type { ToleranceProfile } from './profile.js';
import { conditional } from './survival.js';

/** How likely a sequence comes out clean for one patient, and what is taken again when it does not. */
export interface CleanChance {
  /** Chance that the sequence ends clean, pieces that are taken again on the spot counted in. */
  readonly clean: number;
  /** Chance that one piece is spoiled at its first try. */
  readonly spoiledPiece: number;
  /** Whether spoiled pieces are taken again one by one, the whole once more, or nothing (a timed phase is gone). */
  readonly retakes: 'pieces' | 'whole' | 'nothing';
}

/**
 * Chance of a clean acquisition: every interval kept still, S(u+t)/S(u) each, and held where it is a
 * breath-hold. A piece no longer than the policy's limit is taken again on the spot, once; longer ones
 * are not, because that costs slot. Rotating blades thin the hazard by the part of movements they
 * correct.
 *
 * @param elapsedS time already spent in the scanner, s; the policy's rest carry-over discounts it
 */
export function cleanChance(
  sequence: Sequence,
  time: ScanTime,
  profile: ToleranceProfile,
  policy: SitePolicy,
  elapsedS: number,
): CleanChance {
  const { count, lengthS, kind } = time.intervals;
  const spent = policy.movement.restCarryOver.value * elapsedS;
  const stays = conditional(profile.movement, spent, lengthS);
  const still =
    sequence.family === 'radial-fast-spin-echo'
      ? stays ** (1 - policy.movement.bladesCorrect.value)
      : stays;
  const held = sequence.breathing === 'held' ? profile.hold(lengthS) : 1;
  const good = still * held;
  const pieces =
    kind !== 'whole' && kind !== 'phase' && lengthS <= policy.movement.retakeUpToS.value;
  const each = pieces ? 1 - (1 - good) ** 2 : good;
  return {
    clean: each ** count,
    spoiledPiece: 1 - good,
    retakes: pieces ? 'pieces' : kind === 'phase' ? 'nothing' : 'whole',
  };
}

/** Movement as a reason for a grade. */
export function movementFactor(
  chance: CleanChance,
  policy: SitePolicy,
  sequence: Sequence,
): GradeFactor {
  const levels = policy.movement.cleanChance;
  const grade = gradeAtLeast(chance.clean, levels.value);
  const percent = Math.round(chance.clean * 100);
  const needed = Math.round(levels.value.diagnostic * 100);
  return {
    kind: 'movement',
    grade,
    value: chance.clean,
    limit: levels.value.diagnostic,
    unit: 'chance of clean images',
    sentence:
      grade === 'diagnostic'
        ? `This patient has a ${percent} % chance of clean images in ${sequence.name}.`
        : `This patient has only a ${percent} % chance of clean images in ${sequence.name}; diagnostic needs ${needed} %.`,
    source: levels.source,
  };
}
