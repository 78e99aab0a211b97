import {
  factorsFor,
  lowestGrade,
  rankOf,
  sequenceAt,
  type ClinicalQuestion,
  type Exam,
  type GradeRank,
  type SitePolicy,
} from '../exams/index.js';
import {
  atSeconds,
  castFor,
  choiceProblem,
  exitTime,
  type Candidate,
  type Cast,
  type ChoiceProblem,
  type ExamRequest,
  type PlanningGround,
} from '../planning/index.js';
import { scanTime, untroubledBreathing, type ScannerAbilities } from '../sequences/index.js';
import { profileOf, type ToleranceProfile } from '../tolerance/index.js';
import { inScannerS, type ConsoleState } from './fold.js';

export interface ConsoleExam {
  readonly request: ExamRequest;
  readonly exam: Exam;
  readonly questions: readonly ClinicalQuestion[];
  readonly scanner: ScannerAbilities;
  readonly ground: PlanningGround;
}

/** What is left of an exam, as the same choice that booking solves: minutes, stillness, holds, views still owed. */
export interface Remaining {
  readonly cast: Cast;
  readonly profile: ToleranceProfile;
  readonly problem: ChoiceProblem;
  /** Views that are in, clean, with what they are worth; the best try of each. */
  readonly done: ReadonlyMap<string, Candidate>;
  readonly policy: SitePolicy;
}

/**
 * @param leftS seconds until the slot ends
 */
export function remainingOf(console: ConsoleExam, state: ConsoleState, leftS: number): Remaining {
  const { ground, request, exam, questions, scanner } = console;
  const { policy } = ground.library;
  const profile = profileOf(state.tolerance, policy);
  const full = castFor({
    ...ground,
    exam,
    questions,
    scanner,
    profile,
    request,
  });
  const done = doneViews(console, state);
  const cast: Cast = {
    ...full,
    views: full.views.map(({ view, candidates }) => {
      const own = done.get(view.id);
      const open = state.dropped.has(view.id) ? [] : candidates;
      return {
        view,
        candidates: own === undefined ? open : [own, ...open.filter((c) => isBetter(c, own))],
      };
    }),
  };
  const problem = choiceProblem({
    cast,
    fixed: exitTime(policy),
    profile,
    policy,
    slotS: Math.max(0, Math.floor(leftS)),
  });
  return {
    cast,
    profile,
    done,
    policy,
    problem: {
      ...problem,
      stayLimitS: Math.max(0, Math.floor(profile.stayLimitS - inScannerS(state))),
      shared: state.injectedS === undefined ? problem.shared : [],
      views: problem.views.map((view, index) => ({
        ...view,
        candidates: view.candidates.map((candidate, n) =>
          n === 0 && done.has(cast.views[index]?.view.id ?? '')
            ? { ...candidate, nominalS: 0, time: atSeconds(0) }
            : candidate,
        ),
      })),
    },
  };
}

/** Grades reached so far: per question the lowest over the views it needs, and none while one is missing. */
export function answeredSoFar(
  console: ConsoleExam,
  done: ReadonlyMap<string, Candidate>,
): readonly GradeRank[] {
  return console.questions.map((question) => {
    const ranks = question.needs.map((need) => {
      const answer = done.get(need.view)?.answers.get(question.id);
      return answer === undefined ? 0 : rankOf(answer.grade);
    });
    return Math.min(...ranks) as GradeRank;
  });
}

/** Views whose images came out clean. What came out clean is graded without the chance of movement. */
export function doneViews(
  console: ConsoleExam,
  state: ConsoleState,
): ReadonlyMap<string, Candidate> {
  const { ground, exam, questions, scanner } = console;
  const { library, evidence } = ground;
  const done = new Map<string, Candidate>();
  for (const attempt of state.tries) {
    if (attempt.outcome !== 'clean') continue;
    const view = exam.views.find((v) => v.id === attempt.viewId);
    const sequence = sequenceAt(library, attempt.sequenceId, scanner.fieldT);
    if (view === undefined || sequence === undefined || !view.candidates.includes(sequence.id))
      continue;
    const time = scanTime(sequence, untroubledBreathing);
    if (time.kind === 'impossible') continue;
    const answers = new Map(
      questions.flatMap((question) => {
        const need = question.needs.find((n) => n.view === view.id);
        if (need === undefined) return [];
        const factors = factorsFor({
          policy: library.policy,
          exam,
          question,
          view,
          sequence,
          evidence: evidence.of(view, sequence, need.target),
        });
        return [[question.id, lowestGrade(factors)] as const];
      }),
    );
    const candidate: Candidate = {
      view,
      sequence,
      time,
      answers,
      clean: { clean: 1, spoiledPiece: 0, retakes: 'nothing' },
      quality: 100,
    };
    const before = done.get(view.id);
    if (before === undefined || isBetter(candidate, before)) done.set(view.id, candidate);
  }
  return done;
}

/** Whether a sequence would answer some question of its view better than another does. */
function isBetter(a: Candidate, b: Candidate): boolean {
  return [...a.answers].some(
    ([id, answer]) => rankOf(answer.grade) > rankOf(b.answers.get(id)?.grade ?? 'none'),
  );
}
