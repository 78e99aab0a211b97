import {
  patientClasses,
  statementSources,
  type Calibration,
  type LearnedKind,
  type PatientClass,
  type SitePolicy,
  type Sourced,
  type Spread,
  type StatementSource,
} from '../exams/index.js';
import type { ToleranceStatement } from './statement.js';

export const spanKinds = ['still', 'hold', 'stay'] as const;
/** What is said of a patient and seen at the scanner: keeping still, holding the breath, bearing the scanner. */
export type SpanKind = (typeof spanKinds)[number];

/** A group of patients for whom the policy has one figure where nobody was asked. */
export interface PriorGroup<T> {
  readonly group: string;
  /** In the plural, as a sentence needs it. */
  readonly words: string;
  readonly prior: Sourced<T>;
}

/** Children by age first; then pain, tremor and confusion count as the least still group. */
export function stillGroup(
  statement: ToleranceStatement,
  policy: SitePolicy,
): PriorGroup<Calibration> {
  const age = statement.ageYears;
  const child =
    age === undefined ? undefined : childGroups(policy).find((row) => age < row.underYears);
  if (child !== undefined) return child;
  const unsettled = statement.conditions.some(
    (c) => c === 'tremor' || c === 'pain' || c === 'confused' || c === 'small child',
  );
  return classGroup(unsettled ? 'emergency' : statement.patientClass, policy);
}

export function holdGroup(statement: ToleranceStatement, policy: SitePolicy): PriorGroup<Spread> {
  const [adult, breathless] = holdGroups(policy);
  return statement.conditions.includes('breathless') ? breathless : adult;
}

export function stayGroup(
  statement: ToleranceStatement,
  policy: SitePolicy,
): PriorGroup<Calibration> {
  const [anyone, claustrophobic] = stayGroups(policy);
  return statement.conditions.includes('claustrophobia') ? claustrophobic : anyone;
}

/** The group whose figure a plan takes for a span of this patient where nobody was asked. */
export function groupOf(
  kind: SpanKind,
  statement: ToleranceStatement,
  policy: SitePolicy,
): PriorGroup<Calibration | Spread> {
  if (kind === 'still') return stillGroup(statement, policy);
  return kind === 'hold' ? holdGroup(statement, policy) : stayGroup(statement, policy);
}

/** Every group of the policy, by kind. */
export function stillGroups(policy: SitePolicy): readonly PriorGroup<Calibration>[] {
  return [...patientClasses.map((c) => classGroup(c, policy)), ...childGroups(policy)];
}

export function holdGroups(policy: SitePolicy): readonly [PriorGroup<Spread>, PriorGroup<Spread>] {
  const { holdAdult, holdBreathless } = policy.tolerance;
  return [
    { group: 'adult', words: 'adults', prior: holdAdult },
    { group: 'breathless', words: 'breathless patients', prior: holdBreathless },
  ];
}

export function stayGroups(
  policy: SitePolicy,
): readonly [PriorGroup<Calibration>, PriorGroup<Calibration>] {
  const { stay, stayClaustrophobic } = policy.tolerance;
  return [
    { group: 'anyone', words: 'patients at large', prior: stay },
    { group: 'claustrophobic', words: 'claustrophobic patients', prior: stayClaustrophobic },
  ];
}

/** Those whose word it was, as a group of its own. */
export const saidByGroup = (saidBy: StatementSource): string => `said by ${saidBy}`;
export const saidByGroups: readonly string[] = statementSources.map(saidByGroup);

/** Getting in depends on how somebody comes; walking outpatients are the policy's reference. */
export const entryGroup = (patientClass: PatientClass, transport: string): string =>
  `${patientClass}, ${transport}`;
export const referenceEntry = entryGroup('outpatient', 'walking');

/** Every figure of the policy that the site's own records may replace. */
export function replaceable(
  policy: SitePolicy,
): readonly { readonly kind: LearnedKind; readonly group: string }[] {
  const groups: Readonly<Record<SpanKind, readonly PriorGroup<unknown>[]>> = {
    still: stillGroups(policy),
    hold: holdGroups(policy),
    stay: stayGroups(policy),
  };
  return [
    ...spanKinds.flatMap((kind) => [
      ...groups[kind].map(({ group }) => ({ kind, group })),
      ...saidByGroups.map((group) => ({ kind, group })),
    ]),
    { kind: 'entry', group: referenceEntry },
  ];
}

const classGroup = (c: PatientClass, policy: SitePolicy): PriorGroup<Calibration> => ({
  group: c,
  words: c === 'emergency' ? 'emergency patients' : `${c}s`,
  prior: policy.tolerance.still[c],
});

function childGroups(policy: SitePolicy) {
  return [...policy.tolerance.stillChild]
    .sort((a, b) => a.underYears - b.underYears)
    .map((row) => ({
      group: `child under ${row.underYears}`,
      words: `children under ${row.underYears}`,
      underYears: row.underYears,
      prior: row,
    }));
}
