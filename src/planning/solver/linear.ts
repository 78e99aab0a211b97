import { compiled } from './compiled.js';
import { chooseExactly } from './exact.js';
import { linearChoice } from './linear-rounds.js';
import { programmeThread, type ProgrammeThread } from './linear-worker.js';
import { judgeChoice, type Choice, type ChoiceProblem } from './problem.js';
import { originalPicks, withoutDominated } from './prune.js';

/** One way to pick the sequence set; ways are interchangeable and must agree. */
export interface ChoiceSolver {
  readonly name: string;
  choose(problem: ChoiceProblem): Promise<Choice>;
  /** Ends its thread, if any. A closed solver may be used again. */
  close(): Promise<void>;
}

export interface LinearOptions {
  /** Longest one choice may take before the stand-in answers, milliseconds. */
  readonly wallClockMs?: number;
}

const defaultWallClockMs = 1_000;

/**
 * Picks by linear programme with whole numbers (javascript-lp-solver in a thread of its own). Every answer is
 * checked row by row and its objective recomputed; on anything amiss, or when the wall clock
 * runs out, the exact search answers instead and `provedBy` says why. Calls are worked off one at a time.
 */
export function linearSolver(options: LinearOptions = {}): ChoiceSolver {
  const wallClockMs = options.wallClockMs ?? defaultWallClockMs;
  const thread = programmeThread();
  let queue: Promise<unknown> = Promise.resolve();
  return {
    name: 'linear programme',
    choose: (problem) => {
      const answer = queue.then(() => choose(problem, thread, wallClockMs));
      queue = answer.catch(() => undefined);
      return answer;
    },
    close: async () => {
      await queue;
      await thread.close();
    },
  };
}

async function choose(
  problem: ChoiceProblem,
  thread: ProgrammeThread,
  wallClockMs: number,
): Promise<Choice> {
  const pruned = withoutDominated(problem);
  const outcome = await linearChoice(compiled(pruned.problem), thread, wallClockMs);
  if (outcome.kind === 'chosen') {
    const judged = judgeChoice(problem, originalPicks(pruned, outcome.picks));
    if (judged.feasible) {
      return { ...judged.choice, provedBy: `linear programme, ${outcome.rounds} rounds` };
    }
    return standIn(problem, judged.broken.join('; '));
  }
  return standIn(problem, outcome.why);
}

function standIn(problem: ChoiceProblem, why: string): Choice {
  const choice = chooseExactly(problem);
  return {
    ...choice,
    provedBy: `${choice.provedBy}, standing in for the linear programme: ${why}`,
  };
}
