import { examOf, type ExamRequest, type PlanningGround } from '../planning/index.js';
import type { Problem } from '../shared/index.js';
import { openRequests } from './ground.js';

/** Requests of a file whose exam and questions the library knows, and what was wrong with the others. */
export function usableRequests(
  file: string,
  { library }: PlanningGround,
): { readonly requests: readonly ExamRequest[]; readonly problems: readonly Problem[] } {
  const read = openRequests(file);
  const problems: Problem[] = [...read.problems];
  const requests = read.requests.flatMap(({ request }) => {
    const known = examOf(request, library);
    if (known.kind === 'ok') return [request];
    problems.push(...known.problems);
    return [];
  });
  if (requests.length === 0)
    problems.push({
      code: 'requests-none',
      thing: `file ${file}`,
      value: 'no request that can be used',
      limit: 'the mix of exams and patients is taken from its requests',
      wayOut: 'Give a file with requests; data-demo/requests.csv shows how.',
    });
  return { requests, problems };
}
