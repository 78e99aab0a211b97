import type { Scanner } from '../../day/index.js';
import type { LearningEntry, SiteLibrary, SitePolicy } from '../../exams/index.js';
import {
  chanceAtWords,
  driftWords,
  entrySwitchedOn,
  estimateTitle,
  learn,
  placeWords,
  share,
  spanWords,
  standingWords,
  switchedOn,
  type AchievedRecord,
  type LearnedSpan,
  type LearnedTime,
} from '../../tolerance/index.js';
import { learningChart } from './learning-chart.js';
import { learningEffects, type Effect } from './learning-effects.js';
import { entryYaml } from './learning-entry.js';

export interface LearningInput {
  readonly records: readonly AchievedRecord[];
  /** As its file has it. */
  readonly written: SitePolicy;
  readonly library: SiteLibrary;
  readonly scanners: readonly Scanner[];
  /** ISO date. */
  readonly today: string;
}

/** What patients achieved, against what plans count on, and how a signature changes that. */
export function learningPage(input: LearningInput) {
  const { records, written, library } = input;
  const learned = learn(records, written);
  const tried = learn(records, signedAll(learned.spans, written));
  const spans = learned.spans.flatMap((span, n) =>
    span.records === 0 ? [] : [spanSection(span, tried.spans[n]!, input)],
  );
  const times = learned.times.filter((t) => t.records > 0);
  return {
    none: records.length === 0,
    counted: `${records.length} ${records.length === 1 ? 'record' : 'records'} up to ${records.reduce((last, r) => (r.on > last ? r.on : last), '')}`,
    least: written.learning.leastRecords.value,
    inUse: [...learned.spans, ...learned.times].filter(
      (s) => s.signed?.estimate.state.kind === 'ready',
    ).length,
    spans,
    without: learned.spans.filter((s) => s.records === 0).map(estimateTitle),
    times: times.map((time) => timeRow(time, library, input)),
  };
}

/** A policy in which everything that could be signed is: to see what it would do. */
function signedAll(spans: readonly LearnedSpan[], written: SitePolicy): SitePolicy {
  const entries = spans.flatMap((span): LearningEntry[] => {
    const { prior, state } = span;
    if (state.kind !== 'ready' && !(state.kind === 'too short' && state.reaches > 0)) return [];
    const { kind, group } = prior;
    return [
      {
        ...{ kind, group, signedBy: 'nobody', signedOn: '9999-12-31', because: 'tried out' },
        ...readAt(span),
      },
    ];
  });
  return { ...written, learning: { ...written.learning, entries } };
}

const readAt = ({ prior, state }: LearnedSpan) =>
  state.kind !== 'too short'
    ? {}
    : prior.saidBy === undefined
      ? { readAtS: state.reaches }
      : { readAtShare: Number(state.reaches.toFixed(2)) };

function spanSection(span: LearnedSpan, tried: LearnedSpan, input: LearningInput) {
  const { prior, state } = span;
  const title = estimateTitle(span);
  const estimate = tried.signed?.estimate;
  const can = estimate?.calibrated !== undefined;
  return {
    id: `${prior.kind}-${prior.group.replace(/\W+/g, '-')}`,
    title,
    says: sentence(span.says),
    records: span.records,
    censored: span.censored,
    prior: chanceAtWords(span, prior.curve(prior.at), prior.at),
    source: `${prior.basis}: ${prior.source}`,
    estimate:
      span.reading === undefined
        ? 'none yet'
        : `${chanceAtWords(span, span.reading.chance, span.reading.at)} (${share(span.reading.low)} to ${share(span.reading.high)})`,
    standing: standingWords(span),
    drift: driftWords(span),
    chart: span.reading === undefined ? '' : learningChart(span, title),
    effects: can ? effectsOf(span, estimate, input) : ([] as readonly Effect[]),
    carriedOn:
      can && state.kind === 'too short'
        ? `The entry reads the curve at ${placeWords(span, state.reaches)} and takes for granted that patients go on beyond it as they began.`
        : '',
    yaml: can
      ? entryYaml({
          ...{ kind: prior.kind, group: prior.group, signedOn: input.today },
          ...readAt(span),
          because: capital(estimate.says),
        })
      : '',
  };
}

function effectsOf(
  { prior }: LearnedSpan,
  estimate: NonNullable<LearnedSpan['signed']>['estimate'],
  { records, written, library, scanners }: LearningInput,
): readonly Effect[] {
  const said = records
    .flatMap((r) =>
      r.kind === prior.kind && r.saidBy === prior.saidBy && r.statedS !== undefined
        ? [r.statedS]
        : [],
    )
    .sort((a, b) => a - b);
  const policies = { before: written, after: switchedOn(written, estimate) };
  const usual = said[Math.floor(said.length / 2)] ?? 0;
  return learningEffects(prior, usual, policies, library, scanners);
}

function timeRow(time: LearnedTime, library: SiteLibrary, { written, today }: LearningInput) {
  const { kind, group, records, state } = time;
  const entry = entrySwitchedOn(written, time).time.entry;
  return {
    what:
      kind === 'entry'
        ? `Getting in: ${group}`
        : `Whole exam: ${library.exams.get(group)?.name ?? group}`,
    records,
    says: sentence(time.says),
    standing: standingWords(time),
    change:
      state.kind === 'ready'
        ? `Plans would count ${spanWords(entry.value.meanS)} for getting in instead of ${spanWords(written.time.entry.value.meanS)}, and add to it for class and transport as before.`
        : '',
    yaml:
      state.kind === 'ready' && kind === 'entry'
        ? entryYaml({ kind, group, signedOn: today, because: capital(time.says) })
        : '',
  };
}

const capital = (text: string) => `${text.charAt(0).toUpperCase()}${text.slice(1)}`;
const sentence = (text: string) => `${capital(text)}.`;
