import {
  catalogueRule,
  gradeWords,
  type ClinicalQuestion,
  type Exam,
  type Need,
  type SiteLibrary,
  type View,
} from '../../exams/index.js';
import { families, familyWords, type AcquisitionLimits } from '../../sequences/index.js';
import { timesOf } from './library-page.js';

/** An exam: what is asked, what must be seen, what each kind of image may answer by which rule, and the views. */
export function examPage(exam: Exam, library: SiteLibrary) {
  return {
    name: exam.name,
    facts: `Coil: ${exam.coil}. Contrast medium: ${exam.contrast}.`,
    source: `${exam.basis}: ${exam.source}`,
    questions: exam.questions.map((question) => ({
      id: question.id,
      asks: question.asks,
      about: `${question.name}, weight ${question.weight} of 9`,
      name: question.name,
      needs: question.needs.map((need) => needWords(need, exam)),
      notExcluded: question.notExcluded,
      rules: rulesOf(question, exam, library),
    })),
    views: exam.views.map((view) => viewRow(view, library)),
  };
}

function needWords(need: Need, exam: Exam): string {
  const view = exam.views.find((v) => v.id === need.view)?.name ?? need.view;
  const { target } = need;
  if (target === undefined) {
    return `${view}: no target is computed; the grade rests on the policy and the patient alone.`;
  }
  const pair = `${target.tissue} in ${target.background}`;
  return target.kind === 'border'
    ? `${view}: must show the border of ${pair}, to ${target.sizeMm} mm.`
    : `${view}: must show a ${target.sizeMm} mm target, ${pair}.`;
}

function rulesOf(question: ClinicalQuestion, exam: Exam, library: SiteLibrary) {
  return families.map((family) => {
    const rule = catalogueRule(library.policy, exam.id, question.id, family);
    const { entry } = rule;
    return {
      family: familyWords[family],
      grade: rule.atMost,
      words: gradeWords[rule.atMost],
      rule:
        entry === undefined
          ? 'Default of the policy.'
          : `${entry.because} (${entry.question}, signed by ${entry.signedBy} on ${entry.signedOn}).`,
      source: rule.basis,
    };
  });
}

function viewRow(view: View, library: SiteLibrary) {
  return {
    name: view.name,
    weighting: view.weightings.join(', '),
    contrast: view.contrast,
    candidates: view.candidates.map((id) => ({
      href: `/library/sequences/${id}`,
      name: [...(library.sequences.get(id)?.values() ?? [])][0]?.name ?? id,
      isFullQuality: id === view.reference,
      times: timesOf(library, id)
        .filter((t) => t.href !== undefined)
        .map((t) => `${t.time} at ${t.fieldT} T`)
        .join(', '),
    })),
    limits: view.limits === undefined ? [] : limitLines(view.limits),
    limitsSource: view.limits?.source ?? '',
  };
}

function limitLines(limits: AcquisitionLimits): readonly string[] {
  const most: readonly (readonly [string, number | undefined, string])[] = [
    ['slice', limits.sliceThicknessMm, 'mm'],
    ['gap', limits.sliceGapMm, 'mm'],
    ['pixel area', limits.pixelAreaMm2, 'mm2'],
    ['pixel along phase', limits.pixelPhaseMm, 'mm'],
    ['pixel along frequency', limits.pixelFrequencyMm, 'mm'],
  ];
  return [
    ...most.flatMap(([what, value, unit]) =>
      value === undefined ? [] : [`${what} at most ${value} ${unit}`],
    ),
    ...(limits.notAccepted ?? []).map(
      (n) =>
        `not accepted: ${familyWords[n.family]}${n.dimensions === undefined ? '' : ` (${n.dimensions}D)`}`,
    ),
  ];
}
