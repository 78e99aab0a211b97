import type { LearningEntry, SitePolicy, Sourced } from '../exams/index.js';
import type { Learned, SpanEstimate } from './learning.js';
import type { TimeEstimate } from './learned-times.js';
import { share, spanWords } from './learned-words.js';
import { weibullMean } from './survival.js';

/**
 * The policy with the site's own records in the place of the priors that its signed entries switch on. A signature
 * counts for the records up to its day: later ones change nothing until somebody signs again. An entry whose records are too
 * few or end too early changes nothing.
 *
 * @param policy as it is written
 * @param learned from the same policy
 */
export function withLearned(policy: SitePolicy, learned: Learned): SitePolicy {
  let changed = policy;
  for (const { signed } of learned.spans)
    if (signed !== undefined) changed = switchedOn(changed, signed.estimate, signed.entry);
  for (const { signed } of learned.times)
    if (signed !== undefined) changed = entrySwitchedOn(changed, signed.estimate, signed.entry);
  return changed;
}

/** The policy with one estimate in the place of its prior; the same policy where the estimate is not ready. */
export function switchedOn(
  policy: SitePolicy,
  estimate: SpanEstimate,
  entry?: LearningEntry,
): SitePolicy {
  const { prior, reading, calibrated } = estimate;
  if (reading === undefined || calibrated === undefined) return policy;
  const { kind, group, saidBy, shape } = prior;
  const { tolerance } = policy;
  const put = <T>(value: T): Sourced<T> => ({
    value,
    basis: 'own records',
    source: ownRecords(estimate, entry),
  });
  const change = (part: Partial<SitePolicy['tolerance']>): SitePolicy => ({
    ...policy,
    tolerance: { ...tolerance, ...part },
  });
  if (saidBy !== undefined) {
    // Along the policy's own curve from the share that was read to the whole.
    const whole = calibrated ** ((1 / reading.at) ** shape);
    const before = tolerance.statedReachedLearned;
    return change({
      statedReachedLearned: { ...before, [kind]: { ...before?.[kind], [saidBy]: put(whole) } },
    });
  }
  const point = put({ chance: calibrated, atS: reading.at });
  switch (kind) {
    case 'still':
      return change(
        group in tolerance.still
          ? { still: { ...tolerance.still, [group]: point } }
          : {
              stillChild: tolerance.stillChild.map((row) =>
                `child under ${row.underYears}` === group ? { ...row, ...point } : row,
              ),
            },
      );
    case 'hold': {
      const name = group === 'breathless' ? 'holdBreathless' : 'holdAdult';
      const meanS = weibullMean(calibrated, reading.at, shape);
      return change({ [name]: put({ meanS, cv: tolerance[name].value.cv }) });
    }
    case 'stay':
      return change({ [group === 'claustrophobic' ? 'stayClaustrophobic' : 'stay']: point });
  }
}

/** The same for the time of getting in. */
export function entrySwitchedOn(
  policy: SitePolicy,
  { state, achieved, records, to, prior }: TimeEstimate,
  entry?: LearningEntry,
): SitePolicy {
  if (state.kind !== 'ready' || achieved === undefined) return policy;
  const source = `this site's own records: ${records} exams to ${to ?? ''}${signature(entry)}; before, the policy's figure was a mean of ${spanWords(prior?.meanS ?? 0)} (${prior?.source ?? ''})`;
  const value = { meanS: Math.round(achieved.meanS), cv: Number(achieved.cv.toFixed(3)) };
  return {
    ...policy,
    time: { ...policy.time, entry: { value, basis: 'own records', source } },
  };
}

function ownRecords(
  { prior, records, censored, to, reading }: SpanEstimate,
  entry: LearningEntry | undefined,
): string {
  const before = `${share(reading?.priorChance ?? 0)}${prior.saidBy === undefined ? ` at ${spanWords(reading?.at ?? 0)}` : ''}`;
  return `this site's own records: ${records} exams, ${censored} of them ended first, to ${to ?? ''}${signature(entry)}; before, the policy's figure was ${before} (${prior.source})`;
}

const signature = (entry: LearningEntry | undefined) =>
  entry === undefined ? '' : `, signed by ${entry.signedBy} on ${entry.signedOn}`;
