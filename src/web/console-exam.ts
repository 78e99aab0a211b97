import type { ConsoleExam } from '../console/index.js';
import { examOf } from '../planning/index.js';
import { ProblemError } from '../shared/index.js';
import type { PageDeps } from './deps.js';

/** A booked exam as the console plans it; throws ProblemError where the library no longer has it. */
export function consoleExamOf(
  { ground }: Pick<PageDeps, 'ground'>,
  request: ConsoleExam['request'],
  scanner: ConsoleExam['scanner'],
): ConsoleExam {
  const found = examOf(request, ground.library);
  if (found.kind === 'refused') throw new ProblemError(found.problems[0]!);
  return { request, ...found.value, scanner, ground };
}
