import {
  chanceAtWords,
  driftWords,
  estimateTitle,
  standingWords,
  type Learned,
  type LearnedSpan,
  type LearnedTime,
} from '../../tolerance/index.js';
import { wrapped } from './layout.js';

/** What records show of every figure of the policy, for an 80-column terminal. */
export function learnedText({ spans, times }: Learned): string {
  const withRecords = spans.filter((s) => s.records > 0);
  const lines = [
    ...withRecords.flatMap((span) => [
      estimateTitle(span),
      wrapped(sentence(span.says), '   '),
      wrapped(
        `${span.records} record(s), ${span.censored} ended before it happened; policy: ${chanceAtWords(span, span.prior.curve(span.prior.at), span.prior.at)} (${span.prior.basis}: ${span.prior.source}).`,
        '   ',
      ),
      wrapped(standingWords(span), '   '),
      ...(driftWords(span) === '' ? [] : [wrapped(driftWords(span), '   ! ', '     ')]),
      '',
    ]),
    ...times
      .filter((t) => t.records > 0)
      .flatMap((time) => [
        `${time.kind === 'entry' ? 'Getting in' : 'Whole exam'}: ${time.group}`,
        wrapped(`${sentence(time.says)} ${standingWords(time)}`, '   '),
        '',
      ]),
  ];
  const without = spans.length - withRecords.length;
  return [
    ...lines,
    withRecords.length === 0
      ? 'No exam has left a record of a patient yet: plans count on the figures of the policy.'
      : `No record yet of ${without} other figure(s) of the policy.`,
  ].join('\n');
}

/** One row a figure: spreadsheets read it. Times in seconds; statements as the share of what was said. */
export function learnedCsv({ spans, times }: Learned): string {
  const header =
    'kind,group,records,censored,newest,read_at,unit,achieved,low_95,high_95,policy,state,in_use,source_of_policy';
  const rows = [
    ...spans.map((span) => [
      ...[span.prior.kind, span.prior.group, span.records, span.censored, span.to ?? ''],
      span.reading?.at ?? span.prior.at,
      span.prior.saidBy === undefined ? 's' : 'share of what was said',
      ...[span.reading?.chance ?? '', span.reading?.low ?? '', span.reading?.high ?? ''],
      span.reading?.priorChance ?? span.prior.curve(span.prior.at),
      ...[span.state.kind, inUse(span), `${span.prior.basis}: ${span.prior.source}`],
    ]),
    ...times.map((time) => [
      ...[time.kind, time.group, time.records, 0, time.to ?? '', '', 'mean s'],
      ...[time.achieved?.meanS ?? '', time.low ?? '', time.high ?? ''],
      time.prior?.meanS ?? time.plannedMeanS ?? '',
      ...[time.state.kind, inUse(time), time.prior?.source ?? 'the plans of these exams'],
    ]),
  ];
  return [header, ...rows.map((row) => row.map(cell).join(','))].join('\r\n');
}

/** The same as objects; curves as their steps. */
export function learnedJson({ spans, times }: Learned) {
  return {
    figures: spans.map((span) => ({
      ...estimateJson(span),
      ...(span.signed === undefined
        ? {}
        : { signed: { entry: span.signed.entry, estimate: estimateJson(span.signed.estimate) } }),
    })),
    times,
  };
}

function estimateJson({ prior, curve, ...rest }: Omit<LearnedSpan, 'signed'>) {
  const { kind, group, saidBy, at, basis, source } = prior;
  return {
    ...{ kind, group, ...(saidBy === undefined ? {} : { saidBy }) },
    unit: saidBy === undefined ? 's' : 'share of what was said',
    policy: { at, chance: prior.curve(at), basis, source },
    ...rest,
    signed: undefined,
    curve: curve.steps,
  };
}

const inUse = (one: LearnedSpan | LearnedTime) =>
  one.signed?.estimate.state.kind === 'ready' ? `yes: ${one.signed.entry.signedBy}` : 'no';

const cell = (value: string | number): string =>
  typeof value === 'number' ? String(value) : `"${value.replaceAll('"', '""')}"`;

const sentence = (text: string) => `${text.charAt(0).toUpperCase()}${text.slice(1)}.`;
