import type { SitePolicy } from '../../exams/index.js';
import { percent } from './value-words.js';

/** The policy's figures that the methods page speaks of; its text is the view's own. */
export function methodsPage({ physics, movement, tolerance, time }: SitePolicy) {
  return {
    finish: percent(time.finishConfidence.value),
    contrast: percent(physics.relativeContrastToNoise.value.diagnostic),
    clean: percent(movement.cleanChance.value.diagnostic),
    patientReaches: percent(tolerance.statedReached.patient.value),
    blades: percent(movement.bladesCorrect.value),
  };
}
