import { chooseExactly } from './exact.js';
import type { Choice, ChoiceProblem } from './problem.js';

export interface ChoiceSolver {
  readonly name: string;
  choose(problem: ChoiceProblem): Promise<Choice>;
  close(): Promise<void>;
}

export function linearSolver(_options: { readonly wallClockMs?: number } = {}): ChoiceSolver {
  return {
    name: 'linear programme',
    choose: (problem) => Promise.resolve(chooseExactly(problem)),
    close: () => Promise.resolve(),
  };
}
