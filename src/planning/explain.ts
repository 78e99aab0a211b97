import {
  decidingFactors,
  gradeMarks,
  gradeOf,
  gradeWords,
  rankOf,
  type ClinicalQuestion,
} from '../exams/index.js';
import type { Candidate } from './cast.js';
import type { LeftOut, Lift, PlannedAnswer, Reason } from './plan.js';
import type { Prepared } from './prepare.js';
import type { Choice } from './solver/problem.js';

/** The candidates a choice runs, by view id. */
export function chosenByView(prepared: Prepared, choice: Choice): ReadonlyMap<string, Candidate> {
  const chosen = new Map<string, Candidate>();
  choice.picks.forEach((pick, view) => {
    const cast = prepared.cast.views[view];
    const candidate = cast?.candidates[pick];
    if (cast !== undefined && candidate !== undefined) chosen.set(cast.view.id, candidate);
  });
  return chosen;
}

/** What each asked question gets, and the one-line reason. */
export function explainAnswers(
  prepared: Prepared,
  choice: Choice,
  choices: ReadonlyMap<number, Choice>,
  liftsFor: (question: ClinicalQuestion, index: number) => readonly Lift[],
): readonly PlannedAnswer[] {
  const chosen = chosenByView(prepared, choice);
  return prepared.questions.map((question, index) => {
    const grade = gradeOf(choice.ranks[index] ?? 0);
    const reasons = reasonsFor(question, chosen);
    const low = grade !== 'diagnostic';
    const conditional = contrastCondition(prepared, question, chosen);
    return {
      questionId: question.id,
      name: question.name,
      asks: question.asks,
      weight: question.weight,
      grade,
      mark: gradeMarks[grade],
      words: gradeWords[grade],
      ...(conditional === undefined ? {} : { conditional }),
      because: becauseOf(prepared, question, choices, chosen, low),
      reasons,
      ...(low ? { notExcluded: question.notExcluded } : {}),
      lifts: low ? liftsFor(question, index) : [],
    };
  });
}

function reasonsFor(
  question: ClinicalQuestion,
  chosen: ReadonlyMap<string, Candidate>,
): readonly Reason[] {
  return question.needs.flatMap((need) => {
    const candidate = chosen.get(need.view);
    const answer = candidate?.answers.get(question.id);
    if (candidate === undefined || answer === undefined) return [];
    return answer.factors.map((factor) => ({
      view: candidate.view.name,
      sequence: candidate.sequence.name,
      kind: factor.kind,
      grade: factor.grade,
      words: gradeWords[factor.grade],
      sentence: factor.sentence,
      ...(factor.value === undefined ? {} : { value: factor.value }),
      ...(factor.limit === undefined ? {} : { limit: factor.limit }),
      ...(factor.unit === undefined ? {} : { unit: factor.unit }),
      source: factor.source,
    }));
  });
}

/** The sentence a booking clerk reads first: what holds the answer down most. */
function becauseOf(
  prepared: Prepared,
  question: ClinicalQuestion,
  choices: ReadonlyMap<number, Choice>,
  chosen: ReadonlyMap<string, Candidate>,
  low: boolean,
): string {
  const absent = question.needs.filter((need) => !chosen.has(need.view));
  // What can never be run explains more than what only has no room.
  const missing = absent.find((need) => neverRuns(prepared, need.view)) ?? absent[0];
  if (missing !== undefined) return whyNotRun(prepared, missing.view, choices);
  if (!low)
    return `Carried by ${question.needs.map((n) => chosen.get(n.view)?.sequence.name).join('; ')}.`;
  const lowest = question.needs
    .flatMap((need) => {
      const answer = chosen.get(need.view)?.answers.get(question.id);
      return answer === undefined ? [] : [answer];
    })
    .sort((a, b) => rankOf(a.grade) - rankOf(b.grade))[0];
  if (lowest === undefined) return 'Nothing that is run can show it.';
  const deciding = decidingFactors(lowest);
  const telling =
    deciding.find((f) => f.kind === 'movement') ??
    deciding.find((f) => f.kind === 'contrast-to-noise' || f.kind === 'border') ??
    deciding.find((f) => f.kind === 'limits') ??
    deciding[0];
  return telling?.sentence ?? 'Nothing that is run can show it.';
}

const neverRuns = (prepared: Prepared, viewId: string) =>
  prepared.cast.views.some(({ view, candidates }) => view.id === viewId && candidates.length === 0);

/** Why a view is not run: nothing can serve it, or the slot or the patient's stay has no room. */
export function whyNotRun(
  prepared: Prepared,
  viewId: string,
  choices: ReadonlyMap<number, Choice>,
): string {
  const index = prepared.cast.views.findIndex(({ view }) => view.id === viewId);
  const entry = prepared.cast.views[index];
  if (entry === undefined) return 'The exam has no such view.';
  if (entry.candidates.length === 0) {
    const reasons = prepared.cast.ruledOut.filter((r) => r.view.id === viewId);
    const first = reasons[0]?.why ?? 'the library has no sequence for it';
    return `${entry.view.name} cannot be run: ${first.replace(/\.$/, '')}.`;
  }
  const firstSlotS = [...choices].find(
    ([slotS, c]) => slotS > prepared.request.slotS && (c.picks[index] ?? -1) >= 0,
  )?.[0];
  if (firstSlotS !== undefined) {
    return `${entry.view.name} does not fit: it comes in with a slot of ${firstSlotS / 60} minutes.`;
  }
  return `${entry.view.name} does not fit into the time this patient bears (about ${Math.floor(prepared.profile.stayLimitS / 60)} minutes in the scanner) or would take it from a more important answer.`;
}

/** Views of the asked questions that are not run. */
export function leftOutViews(
  prepared: Prepared,
  choice: Choice,
  choices: ReadonlyMap<number, Choice>,
): readonly LeftOut[] {
  const chosen = chosenByView(prepared, choice);
  return prepared.cast.views
    .filter(({ view }) => !chosen.has(view.id))
    .map(({ view }) => ({ view: view.name, why: whyNotRun(prepared, view.id, choices) }));
}

function contrastCondition(
  prepared: Prepared,
  question: ClinicalQuestion,
  chosen: ReadonlyMap<string, Candidate>,
): string | undefined {
  if (prepared.request.contrast !== 'undecided') return undefined;
  const leans = question.needs.some((n) => chosen.get(n.view)?.view.contrast === 'after');
  return leans ? 'only if the clinicians approve contrast medium, which is undecided' : undefined;
}
