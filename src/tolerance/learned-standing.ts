import type { SpanKind } from './groups.js';
import type { LearnedTime } from './learned-times.js';
import { share, spanWords } from './learned-words.js';
import type { LearnedSpan, LearnedState, SpanEstimate } from './learning.js';

export const kindWords: Readonly<Record<SpanKind, string>> = {
  still: 'Keeping still',
  hold: 'Holding the breath',
  stay: 'Bearing the scanner',
};

/** What an estimate is about: "Keeping still: outpatients who were not asked". */
export function estimateTitle({ prior }: SpanEstimate): string {
  const { kind, words, saidBy } = prior;
  return `${kindWords[kind]}: ${words}${saidBy === undefined ? ' who were not asked' : ''}`;
}

/** A place on the curve in words: a time, or a share of what was said. */
export const placeWords = ({ prior }: SpanEstimate, at: number): string =>
  prior.saidBy === undefined
    ? spanWords(at)
    : `${at >= 1 ? 'the whole' : share(at)} of what was said`;

/** A chance at a place of the curve. */
export const chanceAtWords = (one: SpanEstimate, chance: number, at: number): string =>
  `${share(chance)} ${one.prior.saidBy === undefined ? 'at' : 'reach'} ${placeWords(one, at)}`;

/** Whether plans go by the records now, and why or why not. */
export function standingWords(one: LearnedSpan | LearnedTime): string {
  const { signed } = one;
  if (signed === undefined) return stateWords(one, one.state);
  const { entry, estimate } = signed;
  const by = `${entry.signedBy} on ${entry.signedOn}`;
  if (estimate.state.kind !== 'ready')
    return `Signed by ${by}, but plans keep to the policy's figure. ${stateWords(one, estimate.state)}`;
  const since = one.records - estimate.records;
  const later =
    since > 0
      ? ` ${since} ${since === 1 ? 'record has' : 'records have'} come since; they count when somebody signs again.`
      : '';
  return `In use since the program was last started: signed by ${by} on ${estimate.records} records, because: ${entry.because}.${later}`;
}

function stateWords(one: LearnedSpan | LearnedTime, state: LearnedState): string {
  const { records } = one;
  switch (state.kind) {
    case 'ready':
      return "Enough records to take the place of the policy's figure, once somebody signs for it.";
    case 'no records':
      return 'No record yet.';
    case 'too few':
      return `Too few to change a plan: ${records} of the ${state.least} records that the policy asks for.`;
    case 'too short':
      if (!('prior' in one) || !('curve' in one)) return '';
      return state.reaches <= 0
        ? 'Nobody was followed far enough to read the curve.'
        : `Not followed far enough to change a plan: too few were still followed as far as ${placeWords(one, one.prior.at)}, where the policy gives its figure; the curve can be read up to ${placeWords(one, state.reaches)}.`;
    case 'not to be replaced':
      return `Shown only: ${state.why}.`;
  }
}

/** Newer records against older ones, where they differ more than chance would have it. */
export function driftWords({ drift }: SpanEstimate): string {
  if (drift === undefined || drift.chance >= 0.05) return '';
  const { observed, expected } = drift;
  const way = observed > expected ? 'better' : 'worse';
  return `The newer half of these records went ${way} than the older half (log-rank test, chance ${drift.chance < 0.001 ? 'below 0.1 %' : share(drift.chance)} if nothing had changed). Find out why before anybody signs.`;
}
