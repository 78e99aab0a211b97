import { measureWords } from './measure-words.js';
import type { Measure, MonthRecord } from './month-record.js';
import { studentQuantile } from './student-t.js';

/** A mean over months with its 95 % confidence limits. */
export interface Estimate {
  readonly mean: number;
  readonly low: number;
  readonly high: number;
}

export type Estimates = Readonly<Record<Measure, Estimate>>;

/**
 * Mean of independent values with Student-t limits (Law, Simulation Modeling and Analysis, section 4.5); with one value the
 * limits are infinite: one month cannot say how far it is off.
 *
 * @param confidence e.g. 0.95
 */
export function meanWithLimits(values: readonly number[], confidence = 0.95): Estimate {
  const n = values.length;
  const mean = values.reduce((a, b) => a + b, 0) / Math.max(1, n);
  if (n < 2) return { mean, low: -Infinity, high: Infinity };
  const variance = values.reduce((sum, v) => sum + (v - mean) ** 2, 0) / (n - 1);
  const half = studentQuantile((1 + confidence) / 2, n - 1) * Math.sqrt(variance / n);
  return { mean, low: mean - half, high: mean + half };
}

/** Every measure of a scenario. No measure can fall below 0, nor a share exceed 1: what few months would allow beyond is cut off. */
export function estimatesOf(months: readonly MonthRecord[]): Estimates {
  const free = perMeasure(months, (measure) => months.map((m) => m[measure]));
  const bounded = Object.entries(free).map(([measure, { mean, low, high }]) => {
    const most = measureWords[measure as Measure].unit === '%' ? 1 : Infinity;
    const within = (v: number) => (Number.isFinite(v) ? Math.min(most, Math.max(0, v)) : v);
    return [measure, { mean, low: within(low), high: within(high) }];
  });
  return Object.fromEntries(bounded) as Estimates;
}

/**
 * What a scenario changes against another, month by month on the same patients: pairing takes out what both share
 * (paired-t, Law, section 10.2). Months that only one of them has are left out.
 */
export function differencesOf(
  months: readonly MonthRecord[],
  against: readonly MonthRecord[],
): Estimates {
  const both = Math.min(months.length, against.length);
  const first = months.slice(0, both);
  return perMeasure(first, (measure) => first.map((m, i) => m[measure] - against[i]![measure]));
}

/** Months that say nothing of a measure (no emergency came, say) are left out of it. */
function perMeasure(
  months: readonly MonthRecord[],
  values: (measure: Measure) => readonly number[],
): Estimates {
  const measures = Object.keys(months[0] ?? {}) as Measure[];
  return Object.fromEntries(
    measures.map((m) => [m, meanWithLimits(values(m).filter((v) => !Number.isNaN(v)))]),
  ) as Record<Measure, Estimate>;
}
