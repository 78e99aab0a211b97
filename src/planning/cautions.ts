import type { Prepared } from './prepare.js';

/** What must be said with every plan, by what the request and the exam hold. The tool clears and decides none of it. */
export function cautionsOf(prepared: Prepared, worstGradeIsDiagnostic: boolean): readonly string[] {
  const { request, exam, profile } = prepared;
  const cautions: string[] = [];
  if (request.safetyScreening === 'not yet') {
    cautions.push(
      "Safety screening is not done yet. Clearing a patient for the magnet is the site's task, not this plan's.",
    );
  } else {
    cautions.push(
      'Safety screening: marked as done by the site; this plan clears nobody for the magnet.',
    );
  }
  if (request.contrast === 'undecided') {
    cautions.push(
      "Contrast medium is undecided. The slot keeps room for it; the decision is the clinicians'.",
    );
  }
  if (request.contrast === 'approved') {
    cautions.push(
      'Contrast medium: approved by the clinicians outside this plan, which doses nothing.',
    );
  }
  if (request.contrast === 'not approved' && exam.contrast !== 'never') {
    cautions.push('Contrast medium is not approved: questions that need it stay unanswered.');
  }
  if (request.b1RmsLimitMicroTesla !== undefined) {
    cautions.push(
      "A B1+rms limit was entered. The scanner's own B1+rms and SAR figures and the implant's label rule.",
    );
  }
  if (profile.restsOnPrior) {
    cautions.push(
      'Not everything was asked: the plan rests partly on group figures. Ask, and plan again.',
    );
  }
  if (!worstGradeIsDiagnostic) {
    cautions.push(
      'Answers marked below diagnostic do not rule anything out beyond what their line says.',
    );
  }
  return cautions;
}
