import { sequenceAt, type SiteLibrary } from '../../exams/index.js';
import type { FieldT } from '../../physics/index.js';
import { scanTime, untroubledBreathing, type Sequence } from '../../sequences/index.js';
import { minutesSeconds } from './value-words.js';

/** Scan time at one field on an untroubled patient, or why there is none. */
export interface TimeAtField {
  readonly fieldT: FieldT;
  readonly time: string;
  readonly href?: string;
}

const fields: readonly FieldT[] = [1.5, 3];

/** The library as lists: exams, and sequences by the region whose exams use them. */
export function libraryPage(library: SiteLibrary) {
  const exams = [...library.exams.values()];
  const regionOf = new Map<string, string>();
  for (const exam of exams) {
    for (const id of exam.views.flatMap((v) => v.candidates)) {
      if (!regionOf.has(id)) regionOf.set(id, exam.region);
    }
  }
  const regions = [...new Set(exams.map((e) => e.region)), 'no exam'];
  const all = [...library.sequences.keys()];
  return {
    exams: exams.map((exam) => ({
      href: `/library/exams/${exam.id}`,
      name: exam.name,
      coil: exam.coil,
      questions: exam.questions.map((q) => q.name).join(', '),
      views: exam.views.map((v) => v.name).join('; '),
    })),
    sequenceCount: all.length,
    groups: regions
      .map((region) => ({
        id: `sequences-${region.replace(/[^a-z]+/gi, '-')}`,
        name: `${region.charAt(0).toUpperCase()}${region.slice(1)}`,
        rows: all
          .filter((id) => (regionOf.get(id) ?? 'no exam') === region)
          .flatMap((id) => sequenceRow(library, id)),
      }))
      .filter((group) => group.rows.length > 0),
  };
}

function sequenceRow(library: SiteLibrary, id: string) {
  const first = [...(library.sequences.get(id)?.values() ?? [])][0];
  if (first === undefined) return [];
  const { name, family, weighting, plane, basis } = first;
  return [
    {
      href: `/library/sequences/${id}`,
      name,
      family,
      weighting,
      plane,
      basis,
      times: timesOf(library, id),
    },
  ];
}

/** A sequence's scan time at every field. */
export function timesOf(library: SiteLibrary, id: string): readonly TimeAtField[] {
  return fields.map((fieldT) => {
    const sequence = sequenceAt(library, id, fieldT);
    if (sequence === undefined) return { fieldT, time: 'none' };
    return {
      fieldT,
      time: timeWords(sequence),
      href: `/library/sequences/${id}?field=${fieldT}`,
    };
  });
}

function timeWords(sequence: Sequence): string {
  const time = scanTime(sequence, untroubledBreathing);
  return time.kind === 'possible' ? minutesSeconds(time.acquisitionS) : 'cannot run';
}
