import {
  checkLimits,
  familyWords,
  refusalOf,
  type Assessment,
  type ComputedAssessment,
  type Sequence,
} from '../sequences/index.js';
import type { ClinicalQuestion, Exam, Target, View } from './exam.js';
import { gradeAtLeast, gradeAtMost, gradeWords, type GradeFactor } from './grade.js';
import { catalogueRule, type SitePolicy } from './policy.js';

/** A target held against a sequence and against the view's full-quality reference at the same field. */
export interface PhysicsEvidence {
  readonly target: Target;
  readonly own: Assessment;
  readonly reference: Assessment;
}

/** Everything but the patient that bears on what one sequence may answer of one question through one view. */
export function factorsFor(input: {
  readonly policy: SitePolicy;
  readonly exam: Exam;
  readonly question: ClinicalQuestion;
  readonly view: View;
  readonly sequence: Sequence;
  readonly evidence: PhysicsEvidence | undefined;
}): readonly GradeFactor[] {
  const { policy, exam, question, view, sequence, evidence } = input;
  return [
    ...catalogueFactors(policy, exam, question, sequence),
    ...weightingFactors(view, sequence),
    ...limitFactors(view, sequence),
    ...physicsFactors(policy, question, evidence),
  ];
}

/**
 * The signed policy, and the rule that stands above it: single-shot answers nothing beyond screening
 * unless the policy lists the very question by name, and is diagnostic only by such an entry.
 */
function catalogueFactors(
  policy: SitePolicy,
  exam: Exam,
  question: ClinicalQuestion,
  sequence: Sequence,
): GradeFactor[] {
  const rule = catalogueRule(policy, exam.id, question.id, sequence.family);
  const signed =
    rule.entry === undefined
      ? ''
      : ` (signed by ${rule.entry.signedBy} on ${rule.entry.signedOn}: ${rule.entry.because})`;
  const factors: GradeFactor[] = [
    {
      kind: 'catalogue',
      grade: rule.atMost,
      sentence: `The site policy counts ${familyWords[sequence.family]} for this question at most as ${gradeWords[rule.atMost]}${signed}.`,
      source: rule.basis,
    },
  ];
  if (sequence.family !== 'single-shot') return factors;
  const byName = rule.entry?.question === `${exam.id}/${question.id}`;
  if (byName) return factors;
  return [
    ...factors,
    {
      kind: 'family',
      grade: 'screening',
      sentence:
        'A single-shot look may show something gross; a normal look rules nothing out, because the policy does not list this question by name for it.',
      source: 'rule of the planner: single-shot only for questions listed by name',
    },
  ];
}

function weightingFactors(view: View, sequence: Sequence): GradeFactor[] {
  if (view.weightings.includes(sequence.weighting)) return [];
  return [
    {
      kind: 'weighting',
      grade: 'none',
      sentence: `This needs ${view.weightings.join(' or ')} images; ${sequence.name} is ${sequence.weighting} and cannot show it.`,
      source: `view "${view.id}" of the site library`,
    },
  ];
}

function limitFactors(view: View, sequence: Sequence): GradeFactor[] {
  const limits = view.limits;
  if (limits === undefined) return [];
  const factors: GradeFactor[] = checkLimits(sequence, limits).map((check) => ({
    kind: 'limits',
    grade: check.met ? 'diagnostic' : 'targeted',
    value: check.value,
    limit: check.limit,
    unit: check.unit,
    sentence: check.met
      ? `The ${check.what} of ${figure(check.value)} ${check.unit} is within ${figure(check.limit)} ${check.unit}.`
      : `The ${check.what} is ${figure(check.value)} ${check.unit}; a full exam needs ${figure(check.limit)} ${check.unit} or less.`,
    source: limits.source,
  }));
  const refusal = refusalOf(sequence, limits);
  if (refusal !== undefined) {
    factors.push({
      kind: 'limits',
      grade: 'screening',
      sentence: `A published standard does not accept ${familyWords[sequence.family]} (${sequence.dimensions}D) for ${view.name}.`,
      source: refusal.source,
    });
  }
  return factors;
}

function physicsFactors(
  policy: SitePolicy,
  question: ClinicalQuestion,
  evidence: PhysicsEvidence | undefined,
): GradeFactor[] {
  if (evidence === undefined) return [];
  const { target, own, reference } = evidence;
  if (own.kind === 'not computed' || reference.kind === 'not computed') return [];
  const factors = [contrastFactor(policy, question, target, own, reference)];
  if (target.kind === 'border') factors.push(borderFactor(policy, target, own));
  return factors;
}

function contrastFactor(
  policy: SitePolicy,
  question: ClinicalQuestion,
  target: Target,
  own: ComputedAssessment,
  reference: ComputedAssessment,
): GradeFactor {
  const levels = policy.physics.relativeContrastToNoise;
  const ratio = relativeContrastToNoise(own, reference);
  const grade = gradeAtLeast(ratio, levels.value);
  const what =
    target.kind === 'border'
      ? `the edge of ${target.tissue} against ${target.background}`
      : `a ${figure(target.sizeMm)} mm target (${target.tissue} in ${target.background})`;
  const percent = Math.round(ratio * 100);
  return {
    kind: 'contrast-to-noise',
    grade,
    value: ratio,
    limit: levels.value.diagnostic,
    unit: 'of the full-quality image',
    sentence:
      grade === 'diagnostic'
        ? `For "${question.name}", ${what} shows with ${percent} % of the full-quality clarity.`
        : `For "${question.name}", ${what} shows with only ${percent} % of the full-quality clarity; diagnostic needs ${Math.round(levels.value.diagnostic * 100)} %.`,
    source: levels.source,
  };
}

function borderFactor(policy: SitePolicy, target: Target, own: ComputedAssessment): GradeFactor {
  const levels = policy.physics.borderOverCaliper;
  const ratio = own.borderWidthMm / target.sizeMm;
  const limit = levels.value.diagnostic * target.sizeMm;
  const grade = gradeAtMost(ratio, levels.value);
  return {
    kind: 'border',
    grade,
    value: own.borderWidthMm,
    limit,
    unit: 'mm',
    sentence: Number.isFinite(own.borderWidthMm)
      ? `The edge of ${target.tissue} is ${figure(own.borderWidthMm)} mm wide; measuring it needs ${figure(limit)} mm or less.`
      : `There is no visible edge between ${target.tissue} and ${target.background}.`,
    source: levels.source,
  };
}

/** The same target here over there, both as contrast over noise at the same field. 0 when the reference shows nothing. */
export function relativeContrastToNoise(
  own: ComputedAssessment,
  reference: ComputedAssessment,
): number {
  return reference.contrastToNoise > 0 ? own.contrastToNoise / reference.contrastToNoise : 0;
}

const figure = (x: number) => Number(x.toPrecision(3)).toString();
