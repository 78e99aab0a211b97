import { tissueAt } from '../../physics/index.js';
import {
  hasEchoTrain,
  trainEchoes,
  type LineSignal,
  type Sequence,
} from '../../sequences/index.js';
import { lineChart } from '../charts/line-chart.js';

/** Echo train and k-space weights per tissue, as SVG; none where no signal is computed. */
export function sequenceCharts(
  sequence: Sequence,
  signals: readonly { readonly name: string; readonly signal: LineSignal }[],
): readonly string[] {
  const computed = signals.flatMap(({ name, signal }) =>
    signal.kind === 'computed' ? [{ name, weights: signal.weights }] : [],
  );
  if (computed.length === 0) return [];
  const weights = lineChart({
    title: 'Weight along k-space',
    description: 'Signal on each phase-encode line; flat means sharp, peaked means blurred.',
    xLabel: 'phase-encode line from the centre',
    yLabel: 'signal',
    curves: computed.map(({ name, weights: values }) => ({
      name,
      values,
      firstX: -Math.floor(values.length / 2),
      stepX: 1,
    })),
  });
  if (!hasEchoTrain(sequence)) return [weights];
  const train = lineChart({
    title: 'Echo train',
    description: `Amplitude of each echo for ${computed.map((c) => c.name).join(', ')}, before proton density and fat suppression.`,
    xLabel: 'echo',
    yLabel: 'amplitude',
    curves: computed.map(({ name }) => ({
      name,
      values: trainEchoes(sequence, tissueAt(name, sequence.fieldT)),
      firstX: 1,
      stepX: 1,
    })),
  });
  return [train, weights];
}
