import { gradeMarks, gradeOf, gradeWords, type Grade, type GradeRank } from '../exams/index.js';
import {
  chooseExactly,
  meanS,
  runningOrder,
  stillnessWords,
  type Candidate,
  type Choice,
  type OrderedStep,
} from '../planning/index.js';
import { conditional } from '../tolerance/index.js';
import { inScannerS, type ConsoleState } from './fold.js';
import { answeredSoFar, remainingOf, type ConsoleExam, type Remaining } from './remaining.js';

/** A grade that never travels without its words. */
export interface SaidGrade {
  readonly questionId: string;
  readonly name: string;
  readonly grade: Grade;
  readonly mark: string;
  readonly words: string;
}

export interface NextStep {
  readonly kind: 'sequence' | 'injection';
  readonly viewId?: string;
  readonly sequenceId?: string;
  readonly name: string;
  /** Seconds from now. */
  readonly inS: number;
  readonly takesS: number;
  readonly stillness?: string;
  readonly cleanChance?: number;
}

/** What the console shows after every event. */
export interface Replan {
  readonly answered: readonly SaidGrade[];
  /** What the exam ends with if it goes on as proposed. */
  readonly reachable: readonly SaidGrade[];
  readonly next: readonly NextStep[];
  readonly whyNext: string;
  /** What is lost if the exam stops now, one sentence for all questions of the same fate. */
  readonly lostIfStopped: readonly string[];
  /** What putting a view first costs, where one was asked for. */
  readonly costOfFirst?: readonly string[];
  readonly chanceToFinish: number;
  /** Seconds after the slot's end at which the exam is likely to end: what the next patient waits. */
  readonly nextPatientWaitsS: number;
  /** To be read out before the patient leaves the table, while there is time to choose otherwise. */
  readonly beforeLeaving: readonly string[];
  readonly owed: readonly SaidGrade[];
}

/**
 * The rest of the exam, planned anew from where it stands: the booking's own solver on the minutes, stillness
 * and breath that are left. Choices stay the technologist's; what was put first comes first, and its cost is said.
 *
 * @param slotS length of the slot, s
 */
export function replan(console: ConsoleExam, state: ConsoleState, slotS: number): Replan {
  const leftS = slotS - state.nowS;
  const remaining = remainingOf(console, state, leftS);
  const answered = answeredSoFar(console, remaining.done);
  const free = chooseExactly(remaining.problem);
  const choice = state.ended ? nothingMore(free, answered) : withFirst(remaining, state, free);
  const steps = state.ended ? [] : orderOf(remaining, state, choice);
  const reachable = choice.ranks.map((rank, n) => Math.max(rank, answered[n] ?? 0) as GradeRank);
  const say = (ranks: readonly GradeRank[]) => ranks.map((rank, n) => said(console, n, rank));
  const costOfFirst = costs(console, state, free, choice);
  const final = say(state.ended ? answered : reachable);
  return {
    answered: say(answered),
    reachable: final,
    next: steps.map(nextStep),
    whyNext: whyNext(console, steps),
    lostIfStopped: lostWords(say(answered), final),
    ...(costOfFirst === undefined ? {} : { costOfFirst }),
    chanceToFinish: choice.chance,
    nextPatientWaitsS: Math.max(0, Math.round(state.nowS + meanS(choice.tableTime) - slotS)),
    beforeLeaving: say(answered)
      .filter((g) => g.grade !== 'diagnostic')
      .map((g) => `${g.name}: ${g.words}.`),
    owed: final.filter((g) => g.grade !== 'diagnostic'),
  };
}

/** The choice with a view put first forced in, where that can be had at all. */
function withFirst(remaining: Remaining, state: ConsoleState, free: Choice): Choice {
  const index = remaining.cast.views.findIndex(({ view }) => view.id === state.first);
  if (index < 0 || (free.picks[index] ?? -1) >= 0) return free;
  const { problem } = remaining;
  // Forced by a question of its own that outweighs all others and needs this view alone.
  const weight = 1 + problem.questions.reduce((sum, q) => sum + q.weight, 0);
  const wish = { id: 'put first', weight, needs: [index] };
  const forced = chooseExactly({
    ...problem,
    questions: [...problem.questions, wish],
    views: problem.views.map((view, n) => ({
      ...view,
      candidates: view.candidates.map((c) => ({ ...c, ranks: [...c.ranks, n === index ? 3 : 0] })),
    })),
  });
  return { ...forced, ranks: forced.ranks.slice(0, problem.questions.length) };
}

const nothingMore = (free: Choice, answered: readonly GradeRank[]): Choice => ({
  ...free,
  picks: free.picks.map(() => -1),
  ranks: answered,
});

function orderOf(
  remaining: Remaining,
  state: ConsoleState,
  choice: Choice,
): readonly OrderedStep[] {
  const chosen = choice.picks.flatMap((pick, n): Candidate[] => {
    const candidate = remaining.cast.views[n]?.candidates[pick];
    const isDone = candidate !== undefined && remaining.done.get(candidate.view.id) === candidate;
    return candidate === undefined || isDone ? [] : [candidate];
  });
  const elapsedS = inScannerS(state);
  return runningOrder({
    cast: remaining.cast,
    chosen,
    done: remaining.done,
    stay: (tS) => conditional(remaining.profile.stay, elapsedS, tS),
    startS: 0,
    policy: remaining.policy,
    ...(state.injectedS === undefined ? {} : { injectedAgoS: state.nowS - state.injectedS }),
    ...(state.first === undefined ? {} : { first: state.first }),
  });
}

function nextStep(step: OrderedStep): NextStep {
  const { candidate } = step;
  const times = { inS: Math.round(step.startS), takesS: Math.round(step.endS - step.startS) };
  if (candidate === undefined)
    return { kind: 'injection', name: 'Contrast medium, given by the site', ...times };
  return {
    kind: 'sequence',
    viewId: candidate.view.id,
    sequenceId: candidate.sequence.id,
    name: candidate.sequence.name,
    ...times,
    stillness: stillnessWords(candidate),
    cleanChance: candidate.clean.clean,
  };
}

function said(console: ConsoleExam, index: number, rank: GradeRank): SaidGrade {
  const question = console.questions[index];
  const grade = gradeOf(rank);
  return {
    questionId: question?.id ?? '',
    name: question?.name ?? '',
    grade,
    mark: gradeMarks[grade],
    words: gradeWords[grade],
  };
}

/** What stopping now would lose, questions of the same fate together. */
function lostWords(answered: readonly SaidGrade[], reachable: readonly SaidGrade[]) {
  const names = new Map<string, string[]>();
  answered.forEach((now, n) => {
    const then = reachable[n];
    if (then === undefined || then.grade === now.grade) return;
    const fate = `now ${now.words}; going on could make it ${then.words}`;
    names.set(fate, [...(names.get(fate) ?? []), now.name]);
  });
  return [...names].map(([fate, questions]) => `${questions.join(', ')}: ${fate}.`);
}

function whyNext(console: ConsoleExam, steps: readonly OrderedStep[]): string {
  const first = steps.find((s) => s.candidate !== undefined)?.candidate;
  if (first === undefined) return 'Nothing more fits, or nothing more is owed.';
  const names = console.questions.filter((q) => first.answers.has(q.id)).map((q) => `"${q.name}"`);
  return `${first.sequence.name} comes next: it serves ${names.join(', ')} and keeps the most answers if the exam has to stop early.`;
}

function costs(
  console: ConsoleExam,
  state: ConsoleState,
  free: Choice,
  choice: Choice,
): readonly string[] | undefined {
  if (state.first === undefined || state.ended) return undefined;
  const lower = choice.ranks.flatMap((rank, n) =>
    rank < (free.ranks[n] ?? 0)
      ? [
          `${console.questions[n]?.name ?? ''} falls from ${gradeWords[gradeOf(free.ranks[n] ?? 0)]} to ${gradeWords[gradeOf(rank)]}.`,
        ]
      : [],
  );
  return lower.length > 0 ? lower : ['Putting it first costs no answer.'];
}
