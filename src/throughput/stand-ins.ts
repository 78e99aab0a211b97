import type { ExamRequest } from '../planning/index.js';
import type { PatientGroup } from './scenario.js';

/** A kind of request as counted on record. */
export interface CountedKind {
  readonly request: ExamRequest;
  readonly group: PatientGroup;
  weight: number;
}

/**
 * Kinds that stand for all when there are more than can be planned in minutes: a systematic sample within each exam and group,
 * along what the patients can bear, so that every exam and group keeps its share and its spread (Cochran, Sampling
 * Techniques, chapters 5 and 8). With no more than `most` kinds they stay as they are.
 */
export function standIns(kinds: readonly CountedKind[], most: number): CountedKind[] {
  if (kinds.length <= most) return [...kinds];
  const total = sum(kinds);
  const cells = new Map<string, CountedKind[]>();
  for (const kind of kinds) {
    const key = `${kind.request.examId}|${kind.group}`;
    cells.set(key, [...(cells.get(key) ?? []), kind]);
  }
  return [...cells.values()].flatMap((cell) =>
    sampled(cell, Math.max(1, Math.round((most * sum(cell)) / total))),
  );
}

function sampled(cell: readonly CountedKind[], many: number): CountedKind[] {
  if (cell.length <= many) return [...cell];
  const sorted = [...cell].sort((a, b) => {
    const [left, right] = [bears(a), bears(b)];
    const at = left.findIndex((v, n) => v !== right[n]);
    return at < 0 ? 0 : left[at]! - right[at]!;
  });
  const each = sum(cell) / many;
  const found: CountedKind[] = [];
  let upTo = 0;
  let point = each / 2;
  for (const { weight, ...kind } of sorted) {
    upTo += weight;
    let hits = 0;
    for (; point < upTo; point += each) hits += 1;
    if (hits > 0) found.push({ ...kind, weight: hits * each });
  }
  return found;
}

/** What a request is sorted by: still, in the scanner, breath; not asked comes first. */
function bears({ request }: CountedKind): readonly number[] {
  const { still, stay, hold } = request.tolerance;
  return [still, stay, hold].map((span) => (span.kind === 'stated' ? span.seconds : -1));
}

const sum = (kinds: readonly CountedKind[]) => kinds.reduce((all, k) => all + k.weight, 0);
