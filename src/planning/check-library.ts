import { sequenceAt, type Exam, type SiteLibrary, type View } from '../exams/index.js';
import type { FieldT } from '../physics/index.js';
import {
  scanTime,
  trainDurationMs,
  untroubledBreathing,
  type Sequence,
} from '../sequences/index.js';
import type { Problem } from '../shared/index.js';
import { openEvidence } from './evidence.js';

/** One exam at full quality at one field, on an untroubled patient. */
export interface FullQualityRow {
  readonly examId: string;
  readonly name: string;
  readonly fieldT: FieldT;
  readonly sequences: number;
  readonly acquisitionS: number;
  /** With entry, localiser, pauses, injection and exit at their means. */
  readonly tableTimeS: number;
}

export interface LibraryReport {
  readonly exams: readonly FullQualityRow[];
  /** Pairs of sequence and target that were assessed. */
  readonly assessed: number;
  readonly problems: readonly Problem[];
}

const fields: readonly FieldT[] = [1.5, 3];

/**
 * Holds a loaded library against itself: every sequence must run on an untroubled patient, serve the views
 * that list it, and show its targets by known tissues; single-shot slices must take 0.3 to 1.1 s (common
 * practice, no source). Assesses every pair of sequence and target at both fields.
 */
export function checkLibrary(library: SiteLibrary): LibraryReport {
  const problems: Problem[] = [];
  for (const atFields of library.sequences.values()) {
    for (const sequence of atFields.values()) problems.push(...sequenceProblems(sequence));
  }
  const evidence = openEvidence(library);
  const rows: FullQualityRow[] = [];
  let assessed = 0;
  for (const exam of library.exams.values()) {
    for (const fieldT of fields) {
      rows.push(...fullQuality(exam, fieldT, library));
      for (const view of exam.views) {
        for (const id of view.candidates) {
          const sequence = sequenceAt(library, id, fieldT);
          if (sequence === undefined) continue;
          problems.push(...servingProblems(exam, view, sequence));
          for (const question of exam.questions) {
            const need = question.needs.find((n) => n.view === view.id);
            const found = evidence.of(view, sequence, need?.target);
            if (found === undefined) continue;
            assessed += 1;
            if (found.own.kind === 'not computed' && found.own.why.includes('tissue')) {
              problems.push(
                fault(
                  `exam "${exam.id}", question "${question.id}", view "${view.id}"`,
                  found.own.why,
                  'every target needs tissues with values at the field',
                  'Name other tissues, or give the target null.',
                ),
              );
            }
          }
        }
      }
    }
  }
  return { exams: rows, assessed, problems };
}

function fullQuality(exam: Exam, fieldT: FieldT, library: SiteLibrary): FullQualityRow[] {
  const { time } = library.policy;
  let acquisitionS = 0;
  for (const view of exam.views) {
    const sequence = sequenceAt(library, view.reference, fieldT);
    if (sequence === undefined) return [];
    const spent = scanTime(sequence, untroubledBreathing);
    if (spent.kind === 'impossible') return [];
    acquisitionS += spent.acquisitionS;
  }
  const injected = exam.views.some((v) => v.contrast === 'after');
  const tableTimeS =
    time.entry.value.meanS +
    exam.extraSetUpS +
    time.localiserS.value +
    time.idleBetweenS.value * (exam.views.length + 1) +
    acquisitionS +
    (injected ? time.injection.value.meanS : 0) +
    time.exit.value.meanS;
  return [
    {
      examId: exam.id,
      name: exam.name,
      fieldT,
      sequences: exam.views.length,
      acquisitionS,
      tableTimeS,
    },
  ];
}

function sequenceProblems(sequence: Sequence): Problem[] {
  const time = scanTime(sequence, untroubledBreathing);
  if (time.kind === 'impossible') return [time.problem];
  if (sequence.family !== 'single-shot' || sequence.breathing === 'triggered') return [];
  if (sequence.inversionTimeMs !== undefined) return [];
  const sliceS = time.repetitionTimeMs / 1000;
  if (sequence.dimensions === 3 || sequence.plane === 'slab' || (sliceS >= 0.3 && sliceS <= 1.1))
    return [];
  return [
    fault(
      `sequence "${sequence.id}" at ${sequence.fieldT} T`,
      `a slice takes ${sliceS.toFixed(2)} s (train ${trainDurationMs(sequence).toFixed(0)} ms)`,
      'a single-shot slice takes 0.3 to 1.1 s',
      'Check echo spacing, partial Fourier and the slice interval.',
    ),
  ];
}

function servingProblems(exam: Exam, view: View, sequence: Sequence): Problem[] {
  const where = `exam "${exam.id}", view "${view.id}", candidate "${sequence.id}"`;
  const problems: Problem[] = [];
  if (!view.weightings.includes(sequence.weighting)) {
    problems.push(
      fault(
        where,
        `weighting ${sequence.weighting}`,
        `the view takes ${view.weightings.join(', ')}`,
        'Remove the candidate or correct its weighting.',
      ),
    );
  }
  if (sequence.contrast !== view.contrast && sequence.contrast !== 'none') {
    problems.push(
      fault(
        where,
        `contrast ${sequence.contrast}`,
        `the view is ${view.contrast}`,
        'Use the version made for that phase.',
      ),
    );
  }
  return problems;
}

const fault = (thing: string, value: string, limit: string, wayOut: string): Problem => ({
  code: 'library-check',
  thing,
  value,
  limit,
  wayOut,
});
