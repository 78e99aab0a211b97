/**
 * Problems: what a person is told when something they gave cannot be used.
 * Every problem names the thing, the value, the limit and the way out.
 */
export interface Problem {
  /** Stable code for programs, e.g. `unknown-tissue`. */
  readonly code: string;
  /** The thing and, where known, where it stands: "row 12, field hold_s". */
  readonly thing: string;
  /** The value that was met, as text. */
  readonly value: string;
  /** What would have been accepted. */
  readonly limit: string;
  /** What the reader can do now. */
  readonly wayOut: string;
}

/** One line for a terminal, a log or a page. */
export function sayProblem(problem: Problem): string {
  return `${problem.thing}: ${problem.value}; ${problem.limit}. ${problem.wayOut}`;
}

/** Thrown where going on would mean inventing a value. Carries the whole problem. */
export class ProblemError extends Error {
  override readonly name = 'ProblemError';
  constructor(readonly problem: Problem) {
    super(sayProblem(problem));
  }
}

/** An outcome that may be refused: the value, or every problem found (never only the first). */
export type Result<T> =
  | { readonly kind: 'ok'; readonly value: T }
  | { readonly kind: 'refused'; readonly problems: readonly Problem[] };
