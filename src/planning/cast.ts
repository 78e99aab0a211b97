import {
  factorsFor,
  lowestGrade,
  rankOf,
  relativeContrastToNoise,
  sequenceAt,
  viewsFor,
  type ClinicalQuestion,
  type Exam,
  type GradedAnswer,
  type SiteLibrary,
  type View,
} from '../exams/index.js';
import {
  rfExposure,
  scanTime,
  type ScannerAbilities,
  type ScanTime,
  type Sequence,
} from '../sequences/index.js';
import {
  cleanChance,
  movementFactor,
  type CleanChance,
  type ToleranceProfile,
} from '../tolerance/index.js';
import type { EvidenceBook } from './evidence.js';
import type { ContrastState, ExamRequest } from './request.js';

/** One sequence that could serve one view for this patient on this scanner, timed and graded. */
export interface Candidate {
  readonly view: View;
  readonly sequence: Sequence;
  readonly time: ScanTime;
  readonly clean: CleanChance;
  /** Per asked question that needs this view, by id. */
  readonly answers: ReadonlyMap<string, GradedAnswer>;
  /**
   * Percent of the full-quality image times the chance that it comes out clean, in steps of ten: finer
   * differences are nobody's to see and must not cost minutes or breath-holds.
   */
  readonly quality: number;
}

/** A sequence that was looked at and cannot be used, and why in plain words. */
export interface RuledOut {
  readonly view: View;
  readonly sequenceId: string;
  readonly why: string;
}

/** Everything that could be run for the asked questions: what choosing chooses from. */
export interface Cast {
  readonly exam: Exam;
  readonly questions: readonly ClinicalQuestion[];
  readonly views: readonly { readonly view: View; readonly candidates: readonly Candidate[] }[];
  readonly ruledOut: readonly RuledOut[];
}

export interface CastInput {
  readonly library: SiteLibrary;
  readonly evidence: EvidenceBook;
  readonly exam: Exam;
  readonly questions: readonly ClinicalQuestion[];
  readonly scanner: ScannerAbilities;
  readonly profile: ToleranceProfile;
  /** What the request says about contrast medium and RF exposure. */
  readonly request: Pick<ExamRequest, 'contrast' | 'b1RmsLimitMicroTesla'>;
}

/**
 * Times and grades every candidate of every view for one patient on one scanner. What the
 * patient or the scanner cannot do is ruled out here, which keeps choosing small. Held work is offered
 * once per number of holds, because more and shorter holds may come out better than few long ones.
 */
export function castFor(input: CastInput): Cast {
  const ruledOut: RuledOut[] = [];
  const views = viewsFor(input.exam, input.questions).map((view) => {
    const candidates: Candidate[] = [];
    const rule = (sequenceId: string, why: string) => ruledOut.push({ view, sequenceId, why });
    for (const id of view.candidates) {
      const refusal = contrastRefusal(view, input.request.contrast);
      if (refusal !== undefined) {
        rule(id, refusal);
        continue;
      }
      const sequence = sequenceAt(input.library, id, input.scanner.fieldT);
      if (sequence === undefined) {
        rule(id, `it has no entry at ${input.scanner.fieldT} T`);
        continue;
      }
      for (const offered of timedVersions(sequence, input)) {
        if (typeof offered === 'string') {
          rule(id, offered);
          continue;
        }
        const candidate = gradedCandidate(view, sequence, offered, input);
        if (typeof candidate === 'string') rule(id, candidate);
        else candidates.push(candidate);
      }
    }
    return { view, candidates };
  });
  return { exam: input.exam, questions: input.questions, views, ruledOut };
}

function contrastRefusal(view: View, contrast: ContrastState): string | undefined {
  if (view.contrast !== 'after') return undefined;
  if (contrast === 'not approved') return 'contrast medium is not approved for this patient';
  if (contrast === 'not needed') return 'the request says contrast medium is not needed';
  return undefined;
}

/** The sequence's possible timings for this patient: one, or one per number of breath-holds, or the reason why none. */
function timedVersions(sequence: Sequence, input: CastInput): (ScanTime | string)[] {
  const { breathing } = input.library.policy;
  const options = {
    ability: {
      holdSpanS: input.profile.holdSpanS,
      breathsPerMinute: breathing.breathsPerMinute.value,
    },
    rules: breathing.value,
  };
  const first = scanTime(sequence, options);
  if (first.kind === 'impossible') {
    return [`${first.problem.value}; ${first.problem.limit}`];
  }
  const versions = [first];
  if (first.intervals.kind === 'hold') {
    for (let holds = first.intervals.count + 1; holds <= breathing.value.mostHolds; holds++) {
      const split = scanTime(sequence, { ...options, holds });
      if (split.kind === 'possible') versions.push(split);
    }
  }
  return versions;
}

function gradedCandidate(
  view: View,
  sequence: Sequence,
  time: ScanTime,
  input: CastInput,
): Candidate | string {
  const { policy } = input.library;
  if (input.request.b1RmsLimitMicroTesla !== undefined) {
    const { b1RmsMicroTesla } = rfExposure(sequence, time);
    if (b1RmsMicroTesla > input.request.b1RmsLimitMicroTesla) {
      return `its B1+rms of about ${b1RmsMicroTesla.toFixed(2)} microtesla exceeds the limit of ${input.request.b1RmsLimitMicroTesla} entered for this patient (the scanner's own figure and the implant's label rule)`;
    }
  }
  const clean = cleanChance(
    sequence,
    time,
    input.profile,
    policy,
    policy.movement.assumedElapsedS.value,
  );
  const movement = movementFactor(clean, policy, sequence);
  const answers = new Map<string, GradedAnswer>();
  const shares: number[] = [];
  for (const question of input.questions) {
    const need = question.needs.find((n) => n.view === view.id);
    if (need === undefined) continue;
    const evidence = input.evidence.of(view, sequence, need.target);
    const factors = factorsFor({ policy, exam: input.exam, question, view, sequence, evidence });
    answers.set(question.id, lowestGrade([...factors, movement]));
    if (evidence?.own.kind === 'computed' && evidence.reference.kind === 'computed') {
      shares.push(Math.min(1, relativeContrastToNoise(evidence.own, evidence.reference)));
    }
  }
  const useless = answers.size > 0 && [...answers.values()].every((a) => rankOf(a.grade) === 0);
  if (useless) {
    const first = [...answers.values()][0];
    const why =
      first?.factors.find((f) => f.grade === 'none')?.sentence ?? 'it answers nothing asked';
    return why;
  }
  const share = shares.length > 0 ? shares.reduce((a, b) => a + b, 0) / shares.length : 1;
  return {
    view,
    sequence,
    time,
    clean,
    answers,
    quality: 10 * Math.round(10 * share * clean.clean),
  };
}
