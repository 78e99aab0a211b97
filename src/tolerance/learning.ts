import type { LearningEntry, SitePolicy } from '../exams/index.js';
import type { AchievedRecord } from './achieved.js';
import {
  atRiskAt,
  curveAt,
  kaplanMeier,
  limitsAt,
  type Followed,
  type KaplanMeier,
} from './kaplan-meier.js';
import { recordsFor, spanPriors, type SpanPrior } from './learned-priors.js';
import { learnedTimes, type LearnedTime } from './learned-times.js';
import { estimateSentence } from './learned-words.js';
import { logRank, type LogRank } from './log-rank.js';

/** Whether an estimate may take the place of a prior. */
export type LearnedState =
  | { readonly kind: 'ready' }
  | { readonly kind: 'no records' }
  | { readonly kind: 'too few'; readonly least: number }
  /** Too few are followed as far as the point; `reaches`: how far the curve may be read. */
  | { readonly kind: 'too short'; readonly reaches: number }
  | { readonly kind: 'not to be replaced'; readonly why: string };

/** The curve read at one point, beside what the prior says there. */
export interface Reading {
  /** s, or share of what was said. */
  readonly at: number;
  readonly atRisk: number;
  readonly chance: number;
  /** 95 % limits on the log(-log) scale. */
  readonly low: number;
  readonly high: number;
  readonly priorChance: number;
}

/** What records show of one figure of the policy. */
export interface SpanEstimate {
  readonly prior: SpanPrior;
  readonly records: number;
  /** Ended before the patient moved, let go or wanted out. */
  readonly censored: number;
  /** ISO date of the newest record. */
  readonly to?: string;
  readonly curve: KaplanMeier;
  readonly reading?: Reading;
  readonly state: LearnedState;
  /** The chance at `reading.at` that planning would use; only where the state is ready. */
  readonly calibrated?: number;
  /** The older half of the records against the newer one, where there are enough. */
  readonly drift?: LogRank;
  readonly says: string;
}

export interface LearnedSpan extends SpanEstimate {
  /** Where the policy has a signed entry: the estimate from the records up to the day it was signed. */
  readonly signed?: { readonly entry: LearningEntry; readonly estimate: SpanEstimate };
}

export interface Learned {
  readonly spans: readonly LearnedSpan[];
  readonly times: readonly LearnedTime[];
}

/**
 * What records show of every figure of a policy that they bear on: the Kaplan-Meier curve of what was achieved (of its
 * share of what was said, for statements), read at the point the prior is given at.
 *
 * @param policy as it is written, not with earlier learning in it
 */
export function learn(records: readonly AchievedRecord[], policy: SitePolicy): Learned {
  const sorted = [...records].sort((a, b) => (a.on < b.on ? -1 : a.on > b.on ? 1 : 0));
  const entryOf = (kind: string, group: string) =>
    policy.learning.entries.findLast((e) => e.kind === kind && e.group === group);
  const spans = spanPriors(policy).map((prior): LearnedSpan => {
    const estimate = estimateOf(prior, sorted, policy);
    const entry = entryOf(prior.kind, prior.group);
    if (entry === undefined) return estimate;
    const upTo = sorted.filter((r) => r.on <= entry.signedOn);
    return { ...estimate, signed: { entry, estimate: estimateOf(prior, upTo, policy, entry) } };
  });
  return { spans, times: learnedTimes(sorted, policy, (group) => entryOf('entry', group)) };
}

function estimateOf(
  prior: SpanPrior,
  records: readonly AchievedRecord[],
  policy: SitePolicy,
  entry?: LearningEntry,
): SpanEstimate {
  const own = recordsFor(prior, records);
  const curve = kaplanMeier(own);
  const reaches = reachOf(curve, prior);
  const wanted = (prior.saidBy === undefined ? entry?.readAtS : entry?.readAtShare) ?? prior.at;
  const at = Math.min(wanted, reaches);
  const reading = own.length === 0 || at <= 0 ? undefined : readingAt(curve, at, prior);
  const state = stateOf(prior, own.length, reaches < wanted ? reaches : undefined, policy);
  const estimate = {
    ...{ prior, records: own.length, censored: curve.censored, curve, state },
    ...(own.length === 0 ? {} : { to: own[own.length - 1]!.on }),
    ...(reading === undefined ? {} : { reading }),
    ...(state.kind === 'ready' && reading !== undefined ? { calibrated: usable(reading) } : {}),
    ...driftOf(own, policy),
  };
  return { ...estimate, says: estimateSentence(estimate) };
}

function readingAt(curve: KaplanMeier, at: number, prior: SpanPrior): Reading {
  return {
    at,
    atRisk: atRiskAt(curve, at),
    chance: curveAt(curve, at).survival,
    ...limitsAt(curve, at),
    priorChance: prior.curve(at),
  };
}

function stateOf(
  prior: SpanPrior,
  records: number,
  reaches: number | undefined,
  policy: SitePolicy,
): LearnedState {
  const least = policy.learning.leastRecords.value;
  if (records === 0) return { kind: 'no records' };
  if (prior.kind === 'still' && prior.shape !== 1)
    return {
      kind: 'not to be replaced',
      why: `still times are added up over an exam, which is right for a steady risk (shape 1); the policy has shape ${prior.shape}`,
    };
  if (records < least) return { kind: 'too few', least };
  if (reaches !== undefined) return { kind: 'too short', reaches };
  return { kind: 'ready' };
}

/**
 * A curve is read no further than where still followed are a tenth of the records, and at least five, of those who had no
 * event yet (Pocock and others, Lancet 2002;359:1686: until 10 to 20 % are left). Who had the event is known for good.
 */
function reachOf(curve: KaplanMeier, prior: SpanPrior): number {
  const needed = Math.max(5, curve.records / 10);
  const carries = (at: number) =>
    curve.records >= 5 && atRiskAt(curve, at) >= needed * curveAt(curve, at).survival;
  if (carries(prior.at)) return prior.at;
  const times = [...curve.steps.map((s) => s.time), ...curve.censoredAt];
  const last = Math.max(0, ...times.filter((t) => t < prior.at && carries(t)));
  const step = prior.saidBy !== undefined ? 0.05 : last >= 120 ? 30 : 1;
  return Math.floor(last / step + 1e-9) * step;
}

/**
 * Nobody moved, or everybody did: no estimate is that sure. Then the value that such an outcome meets in one of two cases
 * (the median-unbiased estimate), 0.5^(1/n) for n still followed.
 */
function usable({ chance, atRisk }: Reading): number {
  const sure = 0.5 ** (1 / Math.max(1, atRisk));
  return chance >= 1 ? sure : chance <= 0 ? 1 - sure : chance;
}

function driftOf(own: readonly Followed[], policy: SitePolicy): { readonly drift?: LogRank } {
  if (own.length < policy.learning.leastRecords.value) return {};
  const half = Math.floor(own.length / 2);
  return { drift: logRank(own.slice(0, half), own.slice(half)) };
}
