import {
  decidingFactors,
  gradeOf,
  gradeWords,
  type ClinicalQuestion,
  type Grade,
  type GradeRank,
} from '../exams/index.js';
import type { ScannerAbilities } from '../sequences/index.js';
import type { SpanStatement } from '../tolerance/index.js';
import { chosenByView } from './explain.js';
import type { Lift } from './plan.js';
import { prepare, type Prepared, type PlanningGround } from './prepare.js';
import type { ExamRequest } from './request.js';
import { chooseExactly } from './solver/exact.js';
import type { Choice } from './solver/problem.js';

/** Spans a further question may ask for; each is tried, never assumed. */
const calmStill: SpanStatement = { kind: 'stated', seconds: 45 * 60 };
const longHold: SpanStatement = { kind: 'stated', seconds: 20 };
const longStay: SpanStatement = { kind: 'stated', seconds: 90 * 60 };

interface Variation {
  readonly kind: Lift['kind'];
  readonly ranks: readonly GradeRank[];
  readonly say: (grade: string) => string;
}

/**
 * What would lift each low grade: every suggestion is a plan worked out with one thing changed,
 * so nothing is offered that would not help. Sedation or anaesthesia is never proposed as the fix; where only
 * stillness helps, the talk is named as an option for clinicians.
 */
export function liftFinder(
  prepared: Prepared,
  choice: Choice,
  choices: ReadonlyMap<number, Choice>,
  ground: PlanningGround,
  otherScanners: readonly ScannerAbilities[],
  secondVisit: readonly GradeRank[] | undefined,
): (question: ClinicalQuestion, index: number) => readonly Lift[] {
  const variations = choice.ranks.some((rank) => rank < 3)
    ? triedVariations(prepared, choice, ground, otherScanners)
    : [];
  return (question, index) => {
    const rank = choice.ranks[index] ?? 0;
    const lifts: Lift[] = [];
    for (const [slotS, at] of choices) {
      const reached = at.ranks[index] ?? 0;
      if (slotS <= prepared.request.slotS || reached <= rank) continue;
      lifts.push(
        lift('minutes', gradeOf(reached), (g) => `A slot of ${slotS / 60} minutes makes it ${g}.`),
      );
      break;
    }
    for (const { kind, ranks, say } of variations) {
      const reached = ranks[index] ?? 0;
      if (reached > rank) lifts.push(lift(kind, gradeOf(reached), say));
    }
    const second = secondVisit?.[index] ?? 0;
    if (second > rank) {
      lifts.push(
        lift(
          'second visit',
          gradeOf(second),
          (g) => `A second visit of the same length makes it ${g}.`,
        ),
      );
    }
    if (onlyStillnessHelps(lifts, prepared, choice, question)) {
      lifts.push({
        kind: 'clinicians',
        sentence:
          'If stillness cannot be had, the clinicians may talk with the anaesthesia service; that is their decision and not proposed here.',
      });
    }
    return lifts;
  };
}

function triedVariations(
  prepared: Prepared,
  choice: Choice,
  ground: PlanningGround,
  otherScanners: readonly ScannerAbilities[],
): readonly Variation[] {
  const { request, scanner, profile } = prepared;
  const { tolerance } = request;
  const variations: Variation[] = [];
  const attempt = (
    kind: Lift['kind'],
    changed: ExamRequest,
    on: ScannerAbilities,
    say: (grade: string) => string,
  ) => {
    const other = prepare(changed, on, ground, prepared.fixed);
    if (other.kind !== 'ok') return;
    const ranks = chooseExactly(other.value.problem).ranks;
    if (ranks.some((rank, index) => rank > (choice.ranks[index] ?? 0))) {
      variations.push({ kind, ranks, say });
    }
  };
  attempt(
    'stillness',
    { ...request, tolerance: { ...tolerance, still: calmStill } },
    scanner,
    (g) => `If the patient can keep still throughout, it becomes ${g}.`,
  );
  if (profile.holdSpanS < 20) {
    attempt(
      'hold',
      { ...request, tolerance: { ...tolerance, hold: longHold, followsInstructions: 'yes' } },
      scanner,
      (g) => `If the patient can hold the breath for 20 seconds, it becomes ${g}.`,
    );
  }
  if (profile.stayLimitS < 5400) {
    attempt(
      'stay',
      { ...request, tolerance: { ...tolerance, stay: longStay } },
      scanner,
      (g) => `If the patient can bear longer in the scanner, it becomes ${g}.`,
    );
  }
  if (request.contrast === 'not approved' || request.contrast === 'not needed') {
    attempt(
      'contrast decision',
      { ...request, contrast: 'approved' },
      scanner,
      (g) => `With contrast medium, which is the clinicians' decision, it becomes ${g}.`,
    );
  }
  for (const other of otherScanners) {
    if (other.id === scanner.id) continue;
    attempt('scanner', request, other, (g) => `On ${other.name} it becomes ${g}.`);
  }
  return variations;
}

function lift(kind: Lift['kind'], grade: Grade, say: (grade: string) => string): Lift {
  const words = gradeWords[grade];
  return { kind, grade, words, sentence: say(words) };
}

function onlyStillnessHelps(
  lifts: readonly Lift[],
  prepared: Prepared,
  choice: Choice,
  question: ClinicalQuestion,
): boolean {
  if (lifts.some((l) => l.kind !== 'stillness' && l.grade === 'diagnostic')) return false;
  const chosen = chosenByView(prepared, choice);
  const heldByMovement = question.needs.some((need) => {
    const answer = chosen.get(need.view)?.answers.get(question.id);
    return answer !== undefined && decidingFactors(answer).some((f) => f.kind === 'movement');
  });
  return heldByMovement || lifts.some((l) => l.kind === 'stillness');
}
