import type { SpanKind } from './groups.js';
import type { SpanEstimate } from './learning.js';
import type { TimeEstimate } from './learned-times.js';

const did: Readonly<Record<SpanKind, string>> = {
  still: 'kept still',
  hold: 'held their breath',
  stay: 'bore the scanner',
};
const about: Readonly<Record<SpanKind, string>> = {
  still: 'keeping still',
  hold: 'holding the breath',
  stay: 'bearing the scanner',
};

/** What the records show, and how far that is from the prior, in one sentence without a full stop. */
export function estimateSentence({ prior, records, reading }: Omit<SpanEstimate, 'says'>): string {
  const { kind, words, saidBy } = prior;
  const who = records === 1 ? '1 record' : `${records} ${words}`;
  if (reading === undefined)
    return records === 0 ? 'no record yet' : `${who}: too few are followed to read a curve`;
  const { at, chance, low, high, priorChance } = reading;
  const limits = `(${rangeWords(low, high)})`;
  if (saidBy !== undefined) {
    const part = at >= 1 ? 'in full' : `to ${share(at)}`;
    return `of ${records} ${words} about ${about[kind]}, ${share(chance)} came true ${part} ${limits}; the policy's own figure is ${share(priorChance)}`;
  }
  return `of ${records} ${words} who were not asked, ${share(chance)} ${did[kind]} for ${spanWords(at)} ${limits}; the policy's own figure is ${share(priorChance)}`;
}

export function timeSentence({
  kind,
  records,
  achieved,
  low,
  high,
  prior,
  plannedMeanS,
}: Omit<TimeEstimate, 'says'>): string {
  if (records === 0) return 'no record yet';
  if (achieved === undefined || low === undefined || high === undefined)
    return 'one record, too few for a mean';
  const what = kind === 'entry' ? 'getting in took' : 'getting in and the exam took';
  const against =
    prior !== undefined
      ? `; the policy counts on ${spanWords(prior.meanS)}, varying by ${share(prior.cv)}`
      : plannedMeanS !== undefined
        ? `; planned were ${spanWords(plannedMeanS)}`
        : '';
  return `in ${records} exams ${what} ${spanWords(achieved.meanS)} on average (${spanWords(low)} to ${spanWords(high)}), varying by ${share(achieved.cv)} of that (standard deviation)${against}`;
}

/** Seconds below two minutes, minutes from there on, in three digits that count. */
export const spanWords = (s: number): string =>
  s < 119.5 ? `${Math.round(s)} s` : `${Number((s / 60).toPrecision(s < 600 ? 2 : 3))} min`;

/** Whole percent; near the ends with a decimal, so that nothing sounds surer than it is. */
export const share = (p: number): string => {
  const percent = 100 * p;
  const ends = (percent > 99 && percent < 100) || (percent > 0 && percent < 1);
  return `${percent.toFixed(ends ? 1 : 0)} %`;
};

const rangeWords = (low: number, high: number) =>
  `${share(low).replace(' %', '')} to ${share(high)}`;
