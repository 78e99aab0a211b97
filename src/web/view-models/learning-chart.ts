import type { SpanEstimate, SpanKind } from '../../tolerance/index.js';
import { stepChart } from '../charts/step-chart.js';

const drawnAs: Readonly<Record<SpanKind, { readonly did: string; readonly xLabel: string }>> = {
  still: { did: 'kept still', xLabel: 'minutes still, pieces added up' },
  hold: { did: 'held the breath', xLabel: 'seconds of one breath-hold' },
  stay: { did: 'bore the scanner', xLabel: 'minutes in the scanner' },
};

/** What was achieved as a step curve, beside the curve that plans go by now. */
export function learningChart(estimate: SpanEstimate, title: string): string {
  const { prior, curve, reading } = estimate;
  const { did, xLabel } = drawnAs[prior.kind];
  const scale = prior.saidBy !== undefined ? 100 : prior.kind === 'hold' ? 1 : 1 / 60;
  // Far beyond the point of interest a few long records would squeeze the rest.
  const toX = Math.min(Math.max(curve.lastTime, prior.at), 1.6 * prior.at);
  return stepChart({
    title,
    description: estimate.says,
    xLabel: prior.saidBy !== undefined ? 'percent of what was said' : xLabel,
    yLabel: prior.saidBy === undefined ? `${did} so long` : 'reached so much of it',
    toX: toX * scale,
    steps: {
      name: 'these records; strokes: ended before',
      points: curve.steps.map((s) => ({ x: s.time * scale, y: s.survival })),
      endX: curve.lastTime * scale,
      ticksX: curve.censoredAt.map((at) => at * scale),
    },
    smooth: { name: 'the policy as written', at: (x) => prior.curve(x / scale) },
    ...(reading === undefined
      ? {}
      : {
          limits: {
            name: '95 % limits where the curve is read',
            ...{ x: reading.at * scale, low: reading.low, high: reading.high },
          },
        }),
  });
}
