import type { SitePolicy, StatementSource } from '../exams/index.js';
import { statementSources } from '../exams/index.js';
import type { AchievedRecord } from './achieved.js';
import { holdGroups, saidByGroup, stayGroups, stillGroups, type SpanKind } from './groups.js';
import type { Followed } from './kaplan-meier.js';
import { longestWith, weibullThrough, weibullWithMean, type Survival } from './survival.js';

/** One figure of the policy as a curve, and the records that bear on it. */
export interface SpanPrior {
  readonly kind: SpanKind;
  readonly group: string;
  /** Who it is about, in the plural. */
  readonly words: string;
  /** Set: it is about what was said, and its curve runs over the share of it that was reached; otherwise over seconds. */
  readonly saidBy?: StatementSource;
  readonly curve: Survival;
  readonly shape: number;
  /** The point it is given at: s, or 1 for the whole of what was said. */
  readonly at: number;
  readonly basis: string;
  readonly source: string;
}

/** Every figure of the policy about stillness, breath-holds and bearing that records can be held against. */
export function spanPriors(policy: SitePolicy): readonly SpanPrior[] {
  const { tolerance, movement, breathing } = policy;
  const shapes = { still: movement.shape.value, hold: breathing.shape.value, stay: 1 } as const;
  const points = (['still', 'stay'] as const).flatMap((kind) =>
    (kind === 'still' ? stillGroups(policy) : stayGroups(policy)).map(({ group, words, prior }) => {
      const { chance, atS } = prior.value;
      const curve = weibullThrough(chance, atS, shapes[kind]);
      return { kind, group, words, curve, at: atS, shape: shapes[kind], ...from(prior) };
    }),
  );
  const holds = holdGroups(policy).map(({ group, words, prior }) => {
    const curve = weibullWithMean(prior.value.meanS, shapes.hold);
    // A mean has no point of its own: the span that is planned for where nobody was asked.
    const at = longestWith(curve, tolerance.plannedReached.value, 300);
    return { kind: 'hold' as const, group, words, curve, at, shape: shapes.hold, ...from(prior) };
  });
  const statements = (['still', 'hold', 'stay'] as const).flatMap((kind) =>
    statementSources.map((saidBy) => {
      const reached = tolerance.statedReached[saidBy];
      return {
        ...{ kind, group: saidByGroup(saidBy), words: saidWords[saidBy], saidBy, at: 1 },
        ...{ curve: weibullThrough(reached.value, 1, shapes[kind]), shape: shapes[kind] },
        ...from(reached),
      };
    }),
  );
  const byKind = [...points, ...holds, ...statements];
  return (['still', 'hold', 'stay'] as const).flatMap((kind) =>
    byKind.filter((prior) => prior.kind === kind),
  );
}

/**
 * The records that bear on a figure. A prior stands in where nobody was asked, so only those count for it: what was said
 * decides how much is asked of a patient, and would end the records of the less able first.
 */
export function recordsFor(
  prior: SpanPrior,
  records: readonly AchievedRecord[],
): readonly (Followed & { readonly on: string })[] {
  return records.flatMap(({ kind, group, seconds, censored, statedS, saidBy, on }) => {
    if (kind !== prior.kind) return [];
    if (prior.saidBy === undefined)
      return statedS === undefined && group === prior.group
        ? [{ time: seconds, censored, on }]
        : [];
    return saidBy === prior.saidBy && statedS !== undefined && statedS > 0
      ? [{ time: seconds / statedS, censored, on }]
      : [];
  });
}

const saidWords: Readonly<Record<StatementSource, string>> = {
  patient: 'statements by the patient',
  carer: 'statements by a carer',
  referrer: 'statements by the referrer',
  'earlier exam': 'statements from an earlier exam',
};

const from = ({ basis, source }: { readonly basis: string; readonly source: string }) => ({
  basis,
  source,
});
