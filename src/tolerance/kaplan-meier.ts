/** How long something was followed, and whether it ended by the event or was only seen that far. */
export interface Followed {
  /** Any unit, 0 or more; the same for all. */
  readonly time: number;
  /** True: followed that far without the event (a censored time). */
  readonly censored: boolean;
}

/** The curve right after one time at which events happened. */
export interface CurveStep {
  readonly time: number;
  /** Followed up to this time, just before it. */
  readonly atRisk: number;
  readonly events: number;
  /** Chance of no event up to and with this time. */
  readonly survival: number;
  /** Greenwood's standard error of `survival`. */
  readonly standardError: number;
}

/** A survival curve estimated from times of which some are censored. */
export interface KaplanMeier {
  readonly steps: readonly CurveStep[];
  readonly records: number;
  readonly censored: number;
  /** The longest time seen; beyond it the curve is not known. */
  readonly lastTime: number;
  /** Times at which something was last seen without the event, ascending. */
  readonly censoredAt: readonly number[];
}

/**
 * Product-limit estimate of a survival curve (Kaplan and Meier, J Am Stat Assoc 1958;53:457) with
 * Greenwood's standard error (1926): S times the root of the sum of events / (at risk x left over). Events come
 * before censored times of the same length.
 */
export function kaplanMeier(followed: readonly Followed[]): KaplanMeier {
  const sorted = [...followed].sort((a, b) => a.time - b.time);
  const steps: CurveStep[] = [];
  let survival = 1;
  let sum = 0;
  for (let n = 0; n < sorted.length;) {
    const time = sorted[n]!.time;
    const atRisk = sorted.length - n;
    let events = 0;
    for (; n < sorted.length && sorted[n]!.time === time; n++) if (!sorted[n]!.censored) events++;
    if (events === 0) continue;
    const left = atRisk - events;
    survival *= left / atRisk;
    // Nobody is left: the curve is at 0 and has no error of its own there.
    sum += left === 0 ? 0 : events / (atRisk * left);
    steps.push({ time, atRisk, events, survival, standardError: survival * Math.sqrt(sum) });
  }
  const censoredAt = sorted.filter((f) => f.censored).map((f) => f.time);
  return {
    steps,
    records: sorted.length,
    censored: censoredAt.length,
    lastTime: sorted[sorted.length - 1]?.time ?? 0,
    censoredAt,
  };
}

/** The curve at a time: chance of no event up to and with it, and Greenwood's standard error. */
export function curveAt(
  curve: KaplanMeier,
  time: number,
): { readonly survival: number; readonly standardError: number } {
  const step = curve.steps.findLast((s) => s.time <= time);
  return step ?? { survival: 1, standardError: 0 };
}

/** How many were followed at least that long. */
export function atRiskAt(curve: KaplanMeier, time: number): number {
  const gone = curve.steps.reduce((sum, s) => (s.time < time ? sum + s.events : sum), 0);
  return curve.records - gone - curve.censoredAt.filter((at) => at < time).length;
}

/** First time at which no more than half are left without the event; undefined where the curve ends above that. */
export function medianOf(curve: KaplanMeier): number | undefined {
  return curve.steps.find((s) => s.survival <= 0.5 + 1e-12)?.time;
}

/** Mean time without the event within the first `tau`: the area below the curve up to there. */
export function restrictedMean(curve: KaplanMeier, tau: number): number {
  let area = 0;
  let from = 0;
  let height = 1;
  for (const step of curve.steps) {
    if (step.time >= tau) break;
    area += height * (step.time - from);
    from = step.time;
    height = step.survival;
  }
  return area + height * Math.max(0, tau - from);
}

/** 95 % of the normal distribution lie within this many standard deviations. */
const z95 = 1.959963984540054;

/**
 * 95 % limits of a curve at a time, on the scale of log(-log S), where they stay between 0 and 1 and keep
 * what they promise for few records better than S +- 1.96 standard errors (Kalbfleisch and Prentice 1980; Borgan and
 * Liestol, Scand J Stat 1990;17:35).
 *
 * Where no event has been seen yet, or nobody is left, that scale has no error: the limit that is open is then the exact
 * binomial one for those still followed, 0.025^(1/n) (Clopper and Pearson 1934).
 */
export function limitsAt(
  curve: KaplanMeier,
  time: number,
): { readonly low: number; readonly high: number } {
  const { survival, standardError } = curveAt(curve, time);
  const open = 0.025 ** (1 / Math.max(1, atRiskAt(curve, time)));
  if (survival >= 1) return { low: open, high: 1 };
  if (survival <= 0) return { low: 0, high: 1 - open };
  const half = (z95 * standardError) / (survival * -Math.log(survival));
  return { low: survival ** Math.exp(half), high: survival ** Math.exp(-half) };
}
