import { quantileS } from '../../planning/index.js';
import { groupNames, type AdviceAsked, type AdviceRow } from '../../throughput/index.js';
import { lineChart } from '../charts/line-chart.js';

export interface ChosenRow {
  readonly exam: string;
  readonly group: string;
}

/** Slot advice as a table, with one row drawn. */
export function slotAdvicePage(rows: readonly AdviceRow[], asked: AdviceAsked, chosen: ChosenRow) {
  const drawn = rows.find((r) => r.examId === chosen.exam && r.group === chosen.group) ?? rows[0];
  return {
    rows: rows.map((row) => ({
      exam: row.exam,
      group: groupNames[row.group],
      kinds: row.kinds,
      times: [0.1, 0.5, 0.9].map((p) => minutes(row, p)).join(' / '),
      forChance: row.advice.forChanceMin,
      cheapest: row.advice.cheapestMin,
      href: `exam=${encodeURIComponent(row.examId)}&group=${row.group}`,
      drawn: row === drawn,
    })),
    ...(drawn === undefined ? {} : { drawn: drawnRow(drawn, asked) }),
  };
}

const minutes = ({ tableTime }: AdviceRow, p: number) => Math.round(quantileS(tableTime, p) / 60);

function drawnRow(row: AdviceRow, asked: AdviceAsked) {
  const { tableTime, advice } = row;
  const name = `${row.exam}, ${groupNames[row.group].toLowerCase()}`;
  const firstMin = Math.floor(tableTime.startS / 60);
  // The last of a thousand would stretch the picture.
  const last = Math.min(tableTime.p.length, quantileS(tableTime, 0.999) - tableTime.startS);
  const perMinute = new Array<number>(Math.ceil(last / 60) + 1).fill(0);
  for (let i = 0; i < last; i++)
    perMinute[Math.floor((tableTime.startS + i) / 60) - firstMin]! += 100 * tableTime.p[i]!;
  const cheapest = advice.balances.find((b) => b.slotMin === advice.cheapestMin)!;
  const grid = { firstX: advice.balances[0]!.slotMin, stepX: 5 };
  return {
    name,
    words: `In a slot of ${advice.forChanceMin} min the exam ends in time with at least ${Math.round(100 * asked.chance)} % chance. At the costs given, the cheapest slot is ${advice.cheapestMin} min (${advice.exactMin.toFixed(1)} min if slots could have any length): the exam ends in time with ${Math.round(100 * cheapest.chance)} % chance, and on average runs ${cheapest.lateMin.toFixed(1)} min over and leaves ${cheapest.idleMin.toFixed(1)} min empty.`,
    charts: [
      lineChart({
        title: `Table time of ${name}`,
        description: `Chance per minute; half end within ${minutes(row, 0.5)} min, nine of ten within ${minutes(row, 0.9)} min.`,
        xLabel: 'Table time, min',
        yLabel: 'Chance, % a minute',
        curves: [{ name: 'table time', values: perMinute, firstX: firstMin, stepX: 1 }],
      }),
      lineChart({
        title: `What a slot costs, ${name}`,
        description: `Expected minutes late and idle by slot length; the cost is least at ${advice.cheapestMin} min.`,
        xLabel: 'Slot, min',
        yLabel: 'On average, min',
        curves: [
          { name: 'late', values: advice.balances.map((b) => b.lateMin), ...grid },
          { name: 'idle', values: advice.balances.map((b) => b.idleMin), ...grid },
        ],
      }),
    ],
  };
}
