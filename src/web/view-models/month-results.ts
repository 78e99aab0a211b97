import {
  measureFigure,
  measureWords,
  type ComparedScenario,
  type Comparison,
  type Estimate,
  type Finding,
  type Measure,
} from '../../throughput/index.js';
import { intervalChart } from '../charts/interval-chart.js';

/** Measures that are drawn; all of them stand in the table. */
const drawn: readonly Measure[] = [
  'diagnosticPerDay',
  'patientsPerDay',
  'belowDiagnosticPerDay',
  'quickLookOnlyShare',
  'overtimeMinPerDay',
  'waitNinetiethMin',
];

const verdictWords: Readonly<Record<Finding['verdict'], string>> = {
  better: 'Better',
  worse: 'Worse',
  changed: 'Different',
  unchanged: 'Undecided',
};

/** A comparison in words, charts and a table. */
export function monthResults({ scenarios, days, stopped }: Comparison) {
  const first = scenarios[0]!;
  return {
    stopped,
    days,
    first: first.name,
    findings: scenarios.slice(1).map(({ name, findings }) => ({
      name,
      lines: findings.map((f) => ({ ...f, word: verdictWords[f.verdict] })),
    })),
    charts: drawn.map((measure) => chartOf(measure, scenarios)),
    columns: scenarios.map((s) => s.name),
    rows: (Object.keys(measureWords) as Measure[]).map((measure) => ({
      name: measureWords[measure].name,
      means: measureWords[measure].means,
      unit: measureWords[measure].unit,
      cells: scenarios.map(({ estimates, differences }) => ({
        value: withLimits(measure, estimates[measure]),
        difference:
          differences === undefined ? undefined : differenceWords(measure, differences[measure]),
      })),
    })),
    leftOut: scenarios.flatMap(({ name, leftOut }) =>
      leftOut.length === 0 ? [] : [`${name}: no scanner can take ${leftOut.join('; ')}.`],
    ),
  };
}

function chartOf(measure: Measure, scenarios: readonly ComparedScenario[]): string {
  const { name, unit, times } = measureWords[measure];
  return intervalChart({
    title: name,
    description: scenarios
      .map((s) => `${s.name}: ${withLimits(measure, s.estimates[measure])}`)
      .join('; '),
    xLabel: `${name}, ${unit === '%' ? 'percent' : unit}`,
    rows: scenarios.map((s) => {
      const { mean, low, high } = s.estimates[measure];
      return {
        name: s.name,
        value: mean * times,
        low: low * times,
        high: high * times,
        figure: measureFigure(measure, mean),
      };
    }),
  });
}

const withLimits = (measure: Measure, { mean, low, high }: Estimate) =>
  `${measureFigure(measure, mean)} (${measureFigure(measure, low)} to ${measureFigure(measure, high)})`;

function differenceWords(measure: Measure, { mean, low, high }: Estimate): string {
  const signed = (v: number) => {
    const figure = measureFigure(measure, v);
    return Number(figure) > 0 ? `+${figure}` : figure;
  };
  return `${signed(mean)} (${signed(low)} to ${signed(high)})`;
}
