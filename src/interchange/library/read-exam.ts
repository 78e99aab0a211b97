import type { FieldT } from '../../physics/index.js';
import { tissueNames } from '../../physics/index.js';
import type { Problem } from '../../shared/index.js';
import type { ClinicalQuestion, Exam, Need, View } from '../../exams/index.js';
import type { Sequence } from '../../sequences/index.js';
import { examFile, type ExamFile } from './exam-schema.js';
import { describe, schemaProblems, type YamlSource } from './yaml-source.js';

type Sequences = ReadonlyMap<string, ReadonlyMap<FieldT, Sequence>>;

/**
 * One exam from its file. A candidate that does not exist is reported and left out; a question
 * or view that cannot stand without what is missing is reported and left out; the rest is kept.
 */
export function readExam(
  source: YamlSource,
  sequences: Sequences,
): { readonly exam?: Exam; readonly problems: readonly Problem[] } {
  const parsed = examFile.safeParse(source.value);
  if (!parsed.success) {
    const name = describe((source.value as { exam?: unknown } | null)?.exam);
    return { problems: schemaProblems(parsed.error, source, source.value, `exam ${name}`) };
  }
  const file = parsed.data;
  const problems: Problem[] = [];
  const report = (
    path: readonly PropertyKey[],
    thing: string,
    value: string,
    limit: string,
    wayOut: string,
  ) => {
    const line = source.lineOf(path);
    const place = line === undefined ? source.path : `${source.path}, line ${line}`;
    problems.push({ code: 'library-reference', thing: `${place}, ${thing}`, value, limit, wayOut });
  };

  const viewIds = new Set(file.views.map((v) => v.id));
  const views: View[] = [];
  file.views.forEach((raw, index) => {
    const path = ['views', index];
    const known = raw.candidates.filter((id, at) => {
      if (sequences.has(id)) return true;
      report(
        [...path, 'candidates', at],
        `view "${raw.id}", candidates`,
        describe(id),
        'every candidate must be a sequence of the library',
        'Correct the id, or add the sequence to a file under sequences/.',
      );
      return false;
    });
    if (!known.includes(raw.reference)) {
      report(
        [...path, 'reference'],
        `view "${raw.id}", reference`,
        describe(raw.reference),
        'the reference must be one of the candidates that exist',
        'Name the full-quality sequence of this view.',
      );
      return;
    }
    if (raw.requires !== undefined && !viewIds.has(raw.requires)) {
      report(
        [...path, 'requires'],
        `view "${raw.id}", requires`,
        describe(raw.requires),
        'must be a view of this exam',
        'Correct the id.',
      );
      return;
    }
    views.push({ ...withoutUndefined(raw), candidates: known } as unknown as View);
  });

  const kept = new Set(views.map((v) => v.id));
  const questions: ClinicalQuestion[] = [];
  file.questions.forEach((raw, index) => {
    const needs = raw.needs.map((need) => toNeed(need, raw.target));
    let sound = true;
    for (const need of needs) {
      const view = file.views.find((v) => v.id === need.view);
      if (view === undefined || !kept.has(need.view)) {
        report(
          ['questions', index, 'needs'],
          `question "${raw.id}", needs`,
          describe(need.view),
          'must be a view of this exam that loads',
          'Correct the id, or the view.',
        );
        sound = false;
      }
      for (const tissue of need.target === undefined
        ? []
        : [need.target.tissue, need.target.background]) {
        if (tissueNames.includes(tissue)) continue;
        report(
          ['questions', index],
          `question "${raw.id}", target`,
          describe(tissue),
          `known tissues: ${tissueNames.join(', ')}`,
          'Use one of the known tissues.',
        );
        sound = false;
      }
    }
    if (sound) {
      const { id, name, asks, weight, notExcluded } = raw;
      questions.push({ id, name, asks, weight, notExcluded, needs });
    }
  });
  if (questions.length === 0) return { problems };
  const { exam: id, name, region, coil, contrast, extraSetUpS, basis, source: from } = file;
  return {
    exam: {
      id,
      name,
      region,
      coil,
      contrast,
      extraSetUpS,
      basis,
      source: from,
      questions,
      views,
    } as Exam,
    problems,
  };
}

function toNeed(
  need: ExamFile['questions'][number]['needs'][number],
  common: ExamFile['questions'][number]['target'],
): Need {
  if (typeof need === 'string')
    return common === undefined ? { view: need } : { view: need, target: common };
  const target = need.target === null ? undefined : (need.target ?? common);
  return target === undefined ? { view: need.view } : { view: need.view, target };
}

const withoutUndefined = <T extends object>(part: T) =>
  Object.fromEntries(Object.entries(part).filter(([, value]) => value !== undefined));
