import type { Estimate, FilledDays } from '../../throughput/index.js';
import { quoted } from './csv-cell.js';
import { fitted, wrapped } from './layout.js';

const measures: readonly (readonly [
  string,
  keyof Pick<FilledDays, 'diagnostic' | 'overruns' | 'overtimeMin' | 'longestWaitMin'>,
])[] = [
  ['Questions answered diagnostically', 'diagnostic'],
  ['Exams longer than their slot', 'overruns'],
  ['Overtime, min', 'overtimeMin'],
  ['Longest wait of a day, min', 'longestWaitMin'],
];

const ruleName = ({ rule }: FilledDays) =>
  rule.kind === 'fixed' ? `fixed ${rule.minutes} min` : 'by tolerance';

/** Slot rules side by side for an 80-column terminal. */
export function comparedText(outcomes: readonly FilledDays[], days: number, lives: number): string {
  const line = (what: string, of: (o: FilledDays) => string) =>
    `${fitted(what, 38)} ${outcomes.map((o) => of(o).padStart(13)).join(' ')}`;
  const requests = outcomes[0]?.requests ?? 0;
  return [
    line(`${requests} requests, ${days === 1 ? 'one day' : `${days} days`}`, ruleName),
    line('Patients placed', (o) => String(o.placed)),
    ...measures.map(([what, measure]) => line(what, (o) => o[measure].mean.toFixed(1))),
    '',
    wrapped(
      `Means over ${lives} lives of each filled plan, all days together. Everybody comes, and in time; no coil changes or delays before the exam. Quick looks may be planned under every rule (not diagnostic).`,
      '',
    ),
  ].join('\n');
}

/** One row a rule and measure: spreadsheets read it. */
export function comparedCsv(outcomes: readonly FilledDays[]): string {
  const rows = outcomes.flatMap((o) => {
    const row = (what: string, { mean, low, high }: Estimate) =>
      [quoted(ruleName(o)), quoted(what), ...[mean, low, high].map((v) => plain(v))].join(',');
    const placed = { mean: o.placed, low: o.placed, high: o.placed };
    return [
      row('Patients placed', placed),
      ...measures.map(([what, measure]) => row(what, o[measure])),
    ];
  });
  return ['slot_rule,measure,mean,low_95,high_95', ...rows].join('\r\n');
}

/** Without the last digits that binary arithmetic makes up. */
const plain = (value: number) => String(Number(value.toPrecision(10)));
