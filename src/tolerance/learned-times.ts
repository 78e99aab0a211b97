import {
  patientClasses,
  type LearningEntry,
  type SitePolicy,
  type Spread,
} from '../exams/index.js';
import type { AchievedRecord } from './achieved.js';
import { entryGroup, referenceEntry } from './groups.js';
import type { LearnedState } from './learning.js';
import { timeSentence } from './learned-words.js';

/** What records show of a time: its mean and how much it varies. */
export interface TimeEstimate {
  readonly kind: 'entry' | 'exam';
  /** Class and transport; for `exam` the exam's id. */
  readonly group: string;
  readonly records: number;
  readonly to?: string;
  /** Absent with fewer than two records. */
  readonly achieved?: Spread;
  /** 95 % limits of the mean, s. */
  readonly low?: number;
  readonly high?: number;
  /** What the policy plans for such a patient; an exam has no figure of its own there. */
  readonly prior?: Spread & { readonly source: string };
  /** Mean of what was planned for these very exams, s. */
  readonly plannedMeanS?: number;
  readonly state: LearnedState;
  readonly says: string;
}

export interface LearnedTime extends TimeEstimate {
  readonly signed?: { readonly entry: LearningEntry; readonly estimate: TimeEstimate };
}

/** Getting in by class and transport, and whole exams against their plan. */
export function learnedTimes(
  sorted: readonly AchievedRecord[],
  policy: SitePolicy,
  entryOf: (group: string) => LearningEntry | undefined,
): readonly LearnedTime[] {
  const entries = entryPriors(policy)
    .filter(({ group }) => group === referenceEntry || sorted.some(isOf('entry', group)))
    .map(({ group, prior }): LearnedTime => {
      const estimate = timeOf('entry', group, sorted, policy, prior);
      const entry = entryOf(group);
      if (entry === undefined) return estimate;
      const upTo = sorted.filter((r) => r.on <= entry.signedOn);
      return {
        ...estimate,
        signed: { entry, estimate: timeOf('entry', group, upTo, policy, prior) },
      };
    });
  const exams = [...new Set(sorted.filter((r) => r.kind === 'exam').map((r) => r.group))].sort();
  return [...entries, ...exams.map((id) => timeOf('exam', id, sorted, policy))];
}

const isOf = (kind: AchievedRecord['kind'], group: string) => (r: AchievedRecord) =>
  r.kind === kind && r.group === group;

/** The policy's time for getting in, for every class and transport. */
function entryPriors({ time }: SitePolicy) {
  const { value, source } = time.entry;
  return patientClasses.flatMap((c) =>
    Object.entries(time.transportExtraS).map(([transport, extra]) => ({
      group: entryGroup(c, transport),
      prior: {
        meanS: value.meanS + time.classExtraS[c].value + extra.value,
        cv: value.cv,
        source,
      },
    })),
  );
}

function timeOf(
  kind: 'entry' | 'exam',
  group: string,
  sorted: readonly AchievedRecord[],
  policy: SitePolicy,
  prior?: TimeEstimate['prior'],
): TimeEstimate {
  const own = sorted.filter(isOf(kind, group));
  const n = own.length;
  const meanS = own.reduce((sum, r) => sum + r.seconds, 0) / n;
  const deviationS = Math.sqrt(own.reduce((s, r) => s + (r.seconds - meanS) ** 2, 0) / (n - 1));
  // Normal limits of a mean; with the thirty records asked for before anything is replaced they are near Student's.
  const half = (1.96 * deviationS) / Math.sqrt(n);
  const planned = own.flatMap((r) => (r.statedS === undefined ? [] : [r.statedS]));
  const estimate = {
    ...{ kind, group, records: n, state: timeState(kind, group, n, policy) },
    ...(n === 0 ? {} : { to: own[n - 1]!.on }),
    ...(n < 2
      ? {}
      : { achieved: { meanS, cv: deviationS / meanS }, low: meanS - half, high: meanS + half }),
    ...(prior === undefined ? {} : { prior }),
    ...(planned.length === 0
      ? {}
      : { plannedMeanS: planned.reduce((a, b) => a + b, 0) / planned.length }),
  };
  return { ...estimate, says: timeSentence(estimate) };
}

function timeState(
  kind: 'entry' | 'exam',
  group: string,
  n: number,
  policy: SitePolicy,
): LearnedState {
  const least = policy.learning.leastRecords.value;
  if (n === 0) return { kind: 'no records' };
  if (kind === 'exam')
    return { kind: 'not to be replaced', why: 'an exam is planned from its parts' };
  if (group !== referenceEntry)
    return {
      kind: 'not to be replaced',
      why: 'the policy has one time for walking outpatients and adds to it for the others',
    };
  return n < least ? { kind: 'too few', least } : { kind: 'ready' };
}
