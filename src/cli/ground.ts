import { join } from 'node:path';
import {
  readDepartment,
  readLibrary,
  readRequestsCsv,
  readRequestsJson,
  type ReadRequests,
} from '../interchange/index.js';
import type { Department } from '../day/index.js';
import { openEvidence, type PlanningGround } from '../planning/index.js';
import { ProblemError, sayProblem, type Problem } from '../shared/index.js';
import { demoFolder, readLibraryFiles, readText, shippedLibraryFolder } from './files.js';

/** The library on disk, ready for planning, with everything that was wrong in it. */
export function openGround(folder: string = shippedLibraryFolder): {
  readonly ground: PlanningGround;
  readonly problems: readonly Problem[];
} {
  const { library, problems } = readLibrary(readLibraryFiles(folder));
  if (library === undefined) {
    throw new ProblemError({
      code: 'library-unusable',
      thing: `library ${folder}`,
      value: problems.slice(0, 5).map(sayProblem).join(' | '),
      limit: 'a library needs a policy, an exam and a sequence that load',
      wayOut: 'Run "library check" and mend what it lists.',
    });
  }
  return { ground: { library, evidence: openEvidence(library) }, problems };
}

/** The department file; the demo's unless another is given. */
export function openDepartment(path: string = join(demoFolder, 'department.yaml')): Department {
  const read = readDepartment({ path, text: readText(path) });
  if (read.kind === 'ok') return read.value;
  throw new ProblemError({
    code: 'department-unusable',
    thing: `department ${path}`,
    value: read.problems.map(sayProblem).join(' | '),
    limit: 'the department file must load',
    wayOut: 'Mend the lines named.',
  });
}

/** Requests from CSV or JSON, by the file's ending. */
export function openRequests(path: string): ReadRequests {
  const text = readText(path);
  return /\.json$/i.test(path) ? readRequestsJson(text) : readRequestsCsv(text);
}

/** Asked requests that are not among the rows that could be read. */
export function unknownRequests(
  ids: readonly string[],
  read: ReadRequests,
  file: string,
): readonly Problem[] {
  return ids
    .filter((id) => !read.requests.some((r) => r.request.id === id))
    .map((id) => ({
      code: 'request-unknown',
      thing: `request ${id}`,
      value: 'not among the rows that could be read',
      limit: `${read.requests.length} request(s) in ${file}`,
      wayOut: 'Check the number.',
    }));
}
