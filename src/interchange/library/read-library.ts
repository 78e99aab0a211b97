import type { Exam, SiteLibrary, SitePolicy } from '../../exams/index.js';
import type { FieldT } from '../../physics/index.js';
import type { Sequence } from '../../sequences/index.js';
import type { Problem } from '../../shared/index.js';
import { replaceable } from '../../tolerance/index.js';
import { policyFile } from './policy-schema.js';
import { readExam } from './read-exam.js';
import { readSequences } from './read-sequences.js';
import {
  describe,
  parseYaml,
  schemaProblems,
  type LibraryFile,
  type YamlSource,
} from './yaml-source.js';

export interface LoadedLibrary {
  /** Absent only when there is no usable policy, exam or sequence at all. */
  readonly library?: SiteLibrary;
  /** Everything wrong in the files; what is not named here was loaded. */
  readonly problems: readonly Problem[];
}

/**
 * A site library from its text files: `policy.yaml`, `sequences/*.yaml`, `exams/*.yaml`.
 * Bad entries are reported with file, line, entry and field; they never take good ones with them.
 */
export function readLibrary(files: readonly LibraryFile[]): LoadedLibrary {
  const problems: Problem[] = [];
  const sequences = new Map<string, Map<FieldT, Sequence>>();
  const exams = new Map<string, Exam>();
  let policy: SitePolicy | undefined;

  const sources = (kind: (path: string) => boolean): YamlSource[] =>
    files
      .filter((file) => kind(file.path))
      .flatMap((file) => {
        const parsed = parseYaml(file);
        if (parsed.kind === 'ok') return [parsed.value];
        problems.push(...parsed.problems);
        return [];
      });

  for (const source of sources((path) => path.startsWith('sequences/'))) {
    problems.push(...readSequences(source, sequences));
  }
  for (const source of sources((path) => path.startsWith('exams/'))) {
    const read = readExam(source, sequences);
    problems.push(...read.problems);
    if (read.exam === undefined) continue;
    if (exams.has(read.exam.id)) {
      problems.push(duplicateExam(source.path, read.exam.id));
      continue;
    }
    exams.set(read.exam.id, read.exam);
  }
  for (const source of sources((path) => path === 'policy.yaml')) {
    const parsed = policyFile.safeParse(source.value);
    if (parsed.success) policy = parsed.data as unknown as SitePolicy;
    else problems.push(...schemaProblems(parsed.error, source, source.value, 'site policy'));
  }
  if (policy !== undefined)
    problems.push(...catalogueProblems(policy, exams), ...learningProblems(policy));
  if (policy === undefined && !problems.some((p) => p.thing.startsWith('policy.yaml'))) {
    problems.push({
      code: 'library-no-policy',
      thing: 'policy.yaml',
      value: 'missing',
      limit: 'a library needs its signed site policy',
      wayOut: 'Add policy.yaml beside the folders exams/ and sequences/.',
    });
  }
  if (policy === undefined || exams.size === 0) return { problems };
  return { library: { sequences, exams, policy }, problems };
}

/** Policy entries that speak of questions the library does not have protect nothing: say so. */
function catalogueProblems(policy: SitePolicy, exams: ReadonlyMap<string, Exam>): Problem[] {
  return policy.catalogue.entries
    .filter((entry) => {
      const [examId, questionId] = entry.question.split('/');
      const exam = exams.get(examId ?? '');
      return (
        exam === undefined ||
        (questionId !== '*' && !exam.questions.some((q) => q.id === questionId))
      );
    })
    .map((entry) => ({
      code: 'library-reference',
      thing: 'policy.yaml, catalogue entry',
      value: describe(entry.question),
      limit: 'must name an exam and a question of the library, or exam/*',
      wayOut: 'Correct the entry; until then it has no effect.',
    }));
}

/** A signature for a group that the policy does not have switches nothing on: say so. */
function learningProblems(policy: SitePolicy): Problem[] {
  const known = replaceable(policy);
  return policy.learning.entries
    .filter((entry) => !known.some((k) => k.kind === entry.kind && k.group === entry.group))
    .map((entry) => ({
      code: 'library-reference',
      thing: `policy.yaml, learning entry of kind "${entry.kind}"`,
      value: describe(entry.group),
      limit: `groups of this kind: ${known.flatMap((k) => (k.kind === entry.kind ? [k.group] : [])).join('; ')}`,
      wayOut: 'Correct the entry; until then it has no effect.',
    }));
}

const duplicateExam = (path: string, id: string): Problem => ({
  code: 'library-duplicate',
  thing: `${path}, exam "${id}"`,
  value: 'the id is used twice',
  limit: 'one file per exam',
  wayOut: 'Give one of the two another id.',
});
