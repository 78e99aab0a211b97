import type { FieldT } from '../physics/index.js';
import type { Sequence } from '../sequences/index.js';
import type { ClinicalQuestion, Exam, View } from './exam.js';
import type { SitePolicy } from './policy.js';

/** Everything a site says about its exams: sequences per field, exams, and the signed policy. */
export interface SiteLibrary {
  readonly sequences: ReadonlyMap<string, ReadonlyMap<FieldT, Sequence>>;
  readonly exams: ReadonlyMap<string, Exam>;
  readonly policy: SitePolicy;
}

/** The sequence at a field, or undefined where the library has none. */
export function sequenceAt(library: SiteLibrary, id: string, fieldT: FieldT): Sequence | undefined {
  return library.sequences.get(id)?.get(fieldT);
}

/** Views an exam runs for the asked questions: those they need and their required twins. */
export function viewsFor(exam: Exam, questions: readonly ClinicalQuestion[]): readonly View[] {
  const wanted = new Set<string>();
  for (const question of questions) for (const need of question.needs) wanted.add(need.view);
  for (let grew = true; grew;) {
    grew = false;
    for (const view of exam.views) {
      if (wanted.has(view.id) && view.requires !== undefined && !wanted.has(view.requires)) {
        wanted.add(view.requires);
        grew = true;
      }
    }
  }
  return exam.views.filter((v) => wanted.has(v.id));
}

/** Every view that lists a sequence, with its exam. */
export function viewsOfSequence(
  library: SiteLibrary,
  sequenceId: string,
): readonly { readonly exam: Exam; readonly view: View }[] {
  return [...library.exams.values()].flatMap((exam) =>
    exam.views
      .filter((view) => view.candidates.includes(sequenceId))
      .map((view) => ({ exam, view })),
  );
}
