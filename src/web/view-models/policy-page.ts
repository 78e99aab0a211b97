import { gradeWords, type SiteLibrary } from '../../exams/index.js';
import { familyWords, type Family } from '../../sequences/index.js';
import { policyLabels, policySections } from './policy-labels.js';
import { policyValueLines } from './policy-values.js';
import { inWords } from './value-words.js';

/** One value of the policy, wherever it stands in it. */
export interface PolicyRow {
  readonly what: string;
  readonly lines: readonly string[];
  readonly basis: string;
  readonly source: string;
}

/** The site policy in the open: every value with basis and source, every signed entry with who and when. */
export function policyPage({ policy, exams }: SiteLibrary) {
  return {
    signed: `${policy.site}. Signed by ${policy.signedBy} on ${policy.signedOn}.`,
    entries: policy.catalogue.entries.map((entry) => {
      const [examId = '', questionId = ''] = entry.question.split('/');
      const exam = exams.get(examId);
      return {
        key: entry.question,
        href: exam === undefined ? undefined : `/library/exams/${examId}`,
        exam: exam?.name ?? examId,
        question:
          questionId === '*'
            ? 'every question'
            : (exam?.questions.find((q) => q.id === questionId)?.name ?? questionId),
        family: familyWords[entry.family],
        grade: entry.atMost,
        words: gradeWords[entry.atMost],
        because: entry.because,
        signed: `${entry.signedBy}, ${entry.signedOn}`,
        source: `${entry.basis}: ${entry.source}`,
      };
    }),
    learning: policy.learning.entries.map((entry) => ({
      what: `${entry.kind}: ${entry.group}`,
      because: entry.because,
      signed: `${entry.signedBy}, ${entry.signedOn}`,
    })),
    sections: policySections.map(({ key, name }) => ({
      id: `policy-${key}`,
      name,
      rows: policyRows(policy[key], [key]),
    })),
  };
}

/** Every leaf below a node that has a value, a basis and a source; the path to it in words. */
export function policyRows(node: unknown, path: readonly string[]): readonly PolicyRow[] {
  if (node === null || typeof node !== 'object') return [];
  const own = node as Readonly<Record<string, unknown>>;
  const here: PolicyRow[] =
    'value' in own && 'basis' in own && 'source' in own
      ? [
          {
            what: pathWords(path, own['underYears']),
            lines: policyValueLines(own['value'], path),
            basis: String(own['basis']),
            source: String(own['source']),
          },
        ]
      : [];
  const below = Object.entries(own).filter(([key]) => key !== 'value' && key !== 'entries');
  return [...here, ...below.flatMap(([key, value]) => policyRows(value, [...path, key]))];
}

function pathWords(path: readonly string[], underYears: unknown): string {
  const [section = '', ...rest] = path;
  if (rest.length === 0) return policyLabels[section] ?? inWords(section).words;
  return rest
    .map((key, n) => {
      if (/^\d+$/.test(key)) return `children under ${String(underYears)} years`;
      if (n === rest.length - 1 && key in familyWords) return familyWords[key as Family];
      return policyLabels[[section, ...rest.slice(0, n + 1)].join('.')] ?? inWords(key).words;
    })
    .filter((words) => words !== '')
    .join(': ');
}
