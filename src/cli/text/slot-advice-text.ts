import { quantileS } from '../../planning/index.js';
import { groupNames, type AdviceRow } from '../../throughput/index.js';
import { quoted } from './csv-cell.js';
import { fitted, wrapped } from './layout.js';

/** Within how many minutes one of ten, half and nine of ten exams end. */
export const tenths = ({ tableTime }: Pick<AdviceRow, 'tableTime'>) => ({
  tenthMin: quantileS(tableTime, 0.1) / 60,
  medianMin: quantileS(tableTime, 0.5) / 60,
  ninetiethMin: quantileS(tableTime, 0.9) / 60,
});

/** Slot advice for an 80-column terminal. */
export function adviceText(rows: readonly AdviceRow[], chance: number): string {
  const head = `${fitted('Exam', 24)} ${fitted('Patients', 24)} 1/10 half 9/10  ${chance} %  cheapest`;
  return [
    head,
    ...rows.map((row) => {
      const { tenthMin, medianMin, ninetiethMin } = tenths(row);
      const times = [tenthMin, medianMin, ninetiethMin].map((m) =>
        String(Math.round(m)).padStart(4),
      );
      const { forChanceMin, cheapestMin } = row.advice;
      return `${fitted(row.exam, 24)} ${fitted(groupNames[row.group], 24)} ${times.join(' ')}  ${String(forChanceMin).padStart(4)}  ${String(cheapestMin).padStart(8)}`;
    }),
    '',
    wrapped(
      'Minutes: within which 1 of 10, half and 9 of 10 exams end; the slot for the wished chance; the slot where minutes late and idle cost least on average, whoever waits behind a late exam. Coil changes and delays before the exam are not in them.',
      '',
    ),
  ].join('\n');
}

/** One row an exam and group: spreadsheets read it. */
export function adviceCsv(rows: readonly AdviceRow[]): string {
  const header =
    'exam,patients,kinds_on_record,tenth_min,median_min,ninetieth_min,slot_for_chance_min,cheapest_slot_min';
  const lines = rows.map((row) => {
    const times = Object.values(tenths(row)).map((m) => m.toFixed(1));
    const { forChanceMin, cheapestMin } = row.advice;
    return [
      ...[quoted(row.exam), quoted(groupNames[row.group]), row.kinds],
      ...[...times, forChanceMin, cheapestMin],
    ].join(',');
  });
  return [header, ...lines].join('\r\n');
}
