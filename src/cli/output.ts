import { gradeWords, type Grade } from '../exams/index.js';
import { sayProblem, type Problem } from '../shared/index.js';
import { wrapped } from './text/layout.js';

/** Exit codes, the same for every command. */
export const exitCodes = {
  ok: 0,
  /** Something broke inside. */
  fault: 1,
  /** The command line could not be read. */
  usage: 2,
  /** Some of the input could not be used; the rest was done. */
  partly: 3,
  /** None of the input could be used. */
  nothing: 4,
} as const;

export const exitCodeHelp = `
Exit codes: 0 all done; 2 the command line could not be read; 3 part of the input
could not be used, the rest was done; 4 nothing could be used; 1 a fault inside.`;

export function print(text: string): void {
  process.stdout.write(`${text}\n`);
}

export function printJson(value: unknown): void {
  print(JSON.stringify(value, honest, 2));
}

/**
 * JSON knows no infinity: it becomes a word, not a silent null. And a grade below diagnostic never
 * stands without its words: an object that holds one gets them beside it.
 */
function honest(_key: string, value: unknown): unknown {
  if (typeof value === 'number' && !Number.isFinite(value)) return String(value);
  if (value instanceof Float64Array) return Array.from(value);
  if (value === null || typeof value !== 'object' || Array.isArray(value) || 'words' in value)
    return value;
  const low = Object.values(value).find((v): v is Grade => v === 'screening' || v === 'targeted');
  return low === undefined ? value : { ...value, words: gradeWords[low] };
}

/** Problems go to standard error, so that what was done can still be piped on. */
export function printProblems(problems: readonly Problem[]): void {
  for (const problem of problems) {
    process.stderr.write(`${wrapped(sayProblem(problem), '! ', '  ')}\n`);
  }
}

/** One line that rewrites itself on a terminal, and stays silent elsewhere. */
export function progressLine(what: string): (done: number, of: number) => void {
  if (process.stderr.isTTY !== true) return () => {};
  return (done, of) => {
    process.stderr.write(done >= of ? '\r\x1b[K' : `\r${what}: ${done} of ${of} ...`);
  };
}
