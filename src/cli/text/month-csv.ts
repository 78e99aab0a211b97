import { measureWords, type Comparison, type Measure } from '../../throughput/index.js';
import { quoted } from './csv-cell.js';

const measures = Object.keys(measureWords) as Measure[];

/** One row a scenario and measure: spreadsheets read it. */
export function monthCsv({ scenarios, days }: Comparison): string {
  const rows = scenarios.flatMap(({ name, estimates, differences }) =>
    measures.map((measure) => {
      const { name: what, unit } = measureWords[measure];
      const figures = [estimates[measure], differences?.[measure]].flatMap((e) =>
        e === undefined
          ? ['', '', '']
          : [e.mean, e.low, e.high].map((v) =>
              Number.isFinite(v) ? plain(v * measureWords[measure].times) : '',
            ),
      );
      return [quoted(name), quoted(what), quoted(unit), days, ...figures].join(',');
    }),
  );
  const header =
    'scenario,measure,unit,days,mean,low_95,high_95,difference_from_first,difference_low_95,difference_high_95';
  return [header, ...rows].join('\r\n');
}

/** Without the last digits that binary arithmetic makes up. */
const plain = (value: number) => String(Number(value.toPrecision(10)));
