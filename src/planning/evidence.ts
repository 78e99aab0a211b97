import type { PhysicsEvidence, SiteLibrary, Target, View } from '../exams/index.js';
import { sequenceAt } from '../exams/index.js';
import { ProblemError } from '../shared/index.js';
import { assess, type Assessment, type Sequence } from '../sequences/index.js';

/**
 * What the library's sequences show of the exams' targets. It depends on no patient, so each
 * (sequence, field, target) is worked out once and kept.
 */
export interface EvidenceBook {
  of(view: View, sequence: Sequence, target: Target | undefined): PhysicsEvidence | undefined;
}

/** An empty book over a library; it fills as it is asked. */
export function openEvidence(library: SiteLibrary): EvidenceBook {
  const known = new Map<string, Assessment>();
  const look = (sequence: Sequence, target: Target): Assessment => {
    const key = [
      sequence.id,
      sequence.fieldT,
      target.kind,
      target.tissue,
      target.background,
      target.sizeMm,
    ].join('|');
    let found = known.get(key);
    if (found === undefined) {
      found = tryAssess(sequence, target);
      known.set(key, found);
    }
    return found;
  };
  return {
    of(view, sequence, target) {
      if (target === undefined) return undefined;
      const reference = sequenceAt(library, view.reference, sequence.fieldT);
      if (reference === undefined) {
        const why = `the full-quality sequence "${view.reference}" has no entry at ${sequence.fieldT} T`;
        return { target, own: look(sequence, target), reference: { kind: 'not computed', why } };
      }
      return { target, own: look(sequence, target), reference: look(reference, target) };
    },
  };
}

/** A tissue without a value at the field leaves the grade to the policy alone, and says so. */
function tryAssess(sequence: Sequence, target: Target): Assessment {
  try {
    return assess(sequence, target);
  } catch (error) {
    if (error instanceof ProblemError) return { kind: 'not computed', why: error.message };
    throw error;
  }
}
