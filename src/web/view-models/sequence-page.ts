import { viewsOfSequence, sequenceAt, type SiteLibrary } from '../../exams/index.js';
import { spreadWidthMm, tissueAt } from '../../physics/index.js';
import {
  assess,
  effectiveEchoTimeMs,
  hasEchoTrain,
  lineSignal,
  rfExposure,
  scanTime,
  trainEchoes,
  untroubledBreathing,
  voxelOf,
  type Sequence,
} from '../../sequences/index.js';
import { lineChart } from '../charts/line-chart.js';

const fixed = (x: number, digits = 2) => (Number.isFinite(x) ? x.toFixed(digits) : 'none');

/** A sequence at one field with everything worked out: time line by line, echoes, k-space weights, blur, targets. */
export function sequencePage(sequence: Sequence, library: SiteLibrary) {
  const time = scanTime(sequence, untroubledBreathing);
  const served = viewsOfSequence(library, sequence.id);
  const targets = served.flatMap(({ exam, view }) =>
    exam.questions.flatMap((question) => {
      const need = question.needs.find((n) => n.view === view.id);
      return need?.target === undefined ? [] : [{ exam, view, question, target: need.target }];
    }),
  );
  const tissues = [
    ...new Set(targets.flatMap((t) => [t.target.tissue, t.target.background])),
  ].slice(0, 6);
  const signals = tissues.map((name) => ({
    name,
    signal: lineSignal(sequence, tissueAt(name, sequence.fieldT)),
  }));
  const voxel = voxelOf(sequence);
  const rows = signals.map(({ name, signal }) =>
    signal.kind === 'not computed'
      ? { name, why: signal.why }
      : {
          name,
          signal: fixed(signal.weights[Math.floor(signal.weights.length / 2)] ?? 0, 4),
          blurMm: fixed(spreadWidthMm(signal.weights, voxel.phaseMm)),
          blurPixels: fixed(spreadWidthMm(signal.weights, 1)),
        },
  );
  return {
    time,
    interval: time.kind === 'possible' ? time.intervals : undefined,
    rf: time.kind === 'possible' ? fixed(rfExposure(sequence, time).b1RmsMicroTesla) : undefined,
    effectiveEchoTime: fixed(effectiveEchoTimeMs(sequence), 1),
    pixel: `${fixed(voxel.phaseMm)} x ${fixed(voxel.frequencyMm)} mm, slice ${fixed(voxel.sliceMm, 1)} mm`,
    tissues: rows,
    charts: chartsOf(sequence, signals),
    targets: targets.slice(0, 24).map(({ exam, view, question, target }) => {
      const own = assess(sequence, target);
      const reference = sequenceAt(library, view.reference, sequence.fieldT);
      const full = reference === undefined ? undefined : assess(reference, target);
      const share =
        own.kind === 'computed' && full?.kind === 'computed' && full.contrastToNoise > 0
          ? `${Math.round((100 * own.contrastToNoise) / full.contrastToNoise)} %`
          : 'not computed';
      return {
        exam: exam.name,
        examId: exam.id,
        question: question.name,
        what: `${target.kind === 'border' ? 'border of' : `${target.sizeMm} mm`} ${target.tissue} in ${target.background}`,
        border: own.kind === 'computed' ? `${fixed(own.borderWidthMm)} mm` : own.why,
        share,
      };
    }),
    served: served.map(({ exam, view }) => ({
      examId: exam.id,
      exam: exam.name,
      view: view.name,
      reference: view.reference === sequence.id,
    })),
    parameters: Object.entries(sequence)
      .filter(([name]) => !['id', 'name', 'source', 'basis', 'fieldT'].includes(name))
      .map(([name, value]) => ({
        name,
        value: typeof value === 'object' ? JSON.stringify(value) : String(value),
      })),
  };
}

function chartsOf(
  sequence: Sequence,
  signals: readonly { readonly name: string; readonly signal: ReturnType<typeof lineSignal> }[],
): readonly string[] {
  const computed = signals.flatMap(({ name, signal }) =>
    signal.kind === 'computed' ? [{ name, weights: signal.weights }] : [],
  );
  if (computed.length === 0) return [];
  const charts: string[] = [];
  if (hasEchoTrain(sequence)) {
    charts.push(
      lineChart({
        title: 'Echo train',
        description: `Amplitude of each echo for ${computed.map((c) => c.name).join(', ')}.`,
        xLabel: 'echo',
        yLabel: 'amplitude',
        curves: computed.map(({ name }) => ({
          name,
          values: trainEchoes(sequence, tissueAt(name, sequence.fieldT)),
          firstX: 1,
          stepX: 1,
        })),
      }),
    );
  }
  charts.push(
    lineChart({
      title: 'Weight along k-space',
      description: 'Signal on each phase-encode line; flat means sharp, peaked means blurred.',
      xLabel: 'phase-encode line from the centre',
      yLabel: 'signal',
      curves: computed.map(({ name, weights }) => ({
        name,
        values: weights,
        firstX: -Math.floor(weights.length / 2),
        stepX: 1,
      })),
    }),
  );
  return charts;
}

export type SequencePage = ReturnType<typeof sequencePage>;
