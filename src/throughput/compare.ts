import { differencesOf, estimatesOf, type Estimates } from './estimate.js';
import { findingsOf, type Finding } from './findings.js';
import type { KindsUsed } from './kinds.js';
import type { MonthRecord } from './month-record.js';

/** The months of one scenario that were simulated, in order of their number. */
export interface ScenarioRun {
  readonly name: string;
  readonly months: readonly MonthRecord[];
  readonly daysAMonth: number;
  /** Exams on record that none of its scanners can take. */
  readonly leftOut: readonly string[];
  /** Kinds of request planned and on record; absent where nothing was planned. */
  readonly kinds?: KindsUsed;
}

export interface ComparedScenario extends ScenarioRun {
  readonly estimates: Estimates;
  /** Against the first; absent for the first itself, and where no month was done for both. */
  readonly differences?: Estimates;
  readonly findings: readonly Finding[];
}

export interface Comparison {
  readonly scenarios: readonly ComparedScenario[];
  /** Days both sides of a difference were simulated for, at least. */
  readonly days: number;
  /** True when it was stopped before every month was done. */
  readonly stopped: boolean;
}

/** Side by side: what each scenario gives, and what it changes against the first on the same patients. */
export function compareRuns(runs: readonly ScenarioRun[], stopped = false): Comparison {
  const [first] = runs;
  return {
    stopped,
    days: Math.min(...runs.map((r) => r.months.length * r.daysAMonth)),
    scenarios: runs.map((run, n): ComparedScenario => {
      const estimates = estimatesOf(run.months);
      const both = Math.min(run.months.length, first?.months.length ?? 0);
      if (n === 0 || first === undefined || both === 0) return { ...run, estimates, findings: [] };
      const before = first.months.slice(0, both);
      const after = run.months.slice(0, both);
      const differences = differencesOf(after, before);
      return {
        ...run,
        estimates,
        differences,
        findings: findingsOf(differences, {
          ...{ before: estimatesOf(before), after: estimatesOf(after) },
          ...{ months: both, days: both * run.daysAMonth },
        }),
      };
    }),
  };
}
