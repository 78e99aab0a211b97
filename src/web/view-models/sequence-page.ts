import {
  relativeContrastToNoise,
  sequenceAt,
  viewsOfSequence,
  type ClinicalQuestion,
  type Exam,
  type SiteLibrary,
  type Target,
  type View,
} from '../../exams/index.js';
import { spreadWidthMm, tissueAt } from '../../physics/index.js';
import {
  assess,
  effectiveEchoTimeMs,
  familyWords,
  lineSignal,
  rfExposure,
  scanTime,
  untroubledBreathing,
  voxelOf,
  type LineSignal,
  type ScanTime,
  type Sequence,
} from '../../sequences/index.js';
import { parameterRows } from './parameter-rows.js';
import { sequenceCharts } from './sequence-charts.js';
import { figure, percent } from './value-words.js';

const mostTissues = 6;

interface TargetOfView {
  readonly exam: Exam;
  readonly view: View;
  readonly question: ClinicalQuestion;
  readonly target: Target;
}

/** A sequence at one field with everything worked out: time line by line, echoes, k-space weights, blur, targets. */
export function sequencePage(sequence: Sequence, library: SiteLibrary) {
  const time = scanTime(sequence, untroubledBreathing);
  const served = viewsOfSequence(library, sequence.id);
  const targets: readonly TargetOfView[] = served.flatMap(({ exam, view }) =>
    exam.questions.flatMap((question) => {
      const need = question.needs.find((n) => n.view === view.id);
      return need?.target === undefined ? [] : [{ exam, view, question, target: need.target }];
    }),
  );
  const signals = [...new Set(targets.flatMap((t) => [t.target.tissue, t.target.background]))]
    .slice(0, mostTissues)
    .map((name) => ({ name, signal: lineSignal(sequence, tissueAt(name, sequence.fieldT)) }));
  const voxel = voxelOf(sequence);
  return {
    kind: `${familyWords[sequence.family]}, ${sequence.weighting}, ${sequence.plane}`,
    time,
    ...(time.kind === 'possible' ? { still: stillWords(time), rf: b1Rms(sequence, time) } : {}),
    effectiveEchoTime: `${effectiveEchoTimeMs(sequence).toFixed(1)} ms`,
    pixel: `${figure(voxel.phaseMm)} x ${figure(voxel.frequencyMm)} mm, slice ${figure(voxel.sliceMm)} mm`,
    tissues: signals.map(({ name, signal }) => tissueRow(name, signal, voxel.phaseMm)),
    remarks: [
      ...new Set(signals.flatMap((s) => (s.signal.kind === 'computed' ? s.signal.remarks : []))),
    ],
    charts: sequenceCharts(sequence, signals),
    targets: targets.map((target) => targetRow(sequence, library, target)),
    asked: percent(library.policy.physics.relativeContrastToNoise.value.diagnostic),
    served: served.map(({ exam, view }) => ({
      href: `/library/exams/${exam.id}`,
      exam: exam.name,
      view: view.name,
      isFullQuality: view.reference === sequence.id,
    })),
    parameters: parameterRows(sequence),
  };
}

const pieces: Readonly<Record<ScanTime['intervals']['kind'], string>> = {
  whole: 'in one piece',
  slice: 'each slice by itself',
  repeat: 'each image by itself',
  hold: 'each breath-hold by itself',
  phase: 'each timed phase by itself',
};

function stillWords({ intervals }: ScanTime): string {
  const length = `${figure(intervals.lengthS)} s`;
  return intervals.count === 1
    ? `${length}, ${pieces[intervals.kind]}`
    : `${intervals.count} times ${length}, ${pieces[intervals.kind]}`;
}

const b1Rms = (sequence: Sequence, time: ScanTime) =>
  rfExposure(sequence, time).b1RmsMicroTesla.toFixed(2);

function tissueRow(name: string, signal: LineSignal, pixelMm: number) {
  if (signal.kind === 'not computed') return { name, why: `not computed: ${signal.why}` };
  const centre = signal.weights[Math.floor(signal.weights.length / 2)] ?? 0;
  if (centre < 0.0005) return { name, why: 'no signal' };
  return {
    name,
    signal: centre.toFixed(3),
    blurMm: spreadWidthMm(signal.weights, pixelMm).toFixed(2),
    blurPixels: spreadWidthMm(signal.weights, 1).toFixed(2),
  };
}

function targetRow(sequence: Sequence, library: SiteLibrary, of: TargetOfView) {
  const { exam, view, question, target } = of;
  const own = assess(sequence, target);
  const reference = sequenceAt(library, view.reference, sequence.fieldT);
  const full = reference === undefined ? undefined : assess(reference, target);
  const pair = `${target.tissue} in ${target.background}`;
  return {
    href: `/library/exams/${exam.id}`,
    exam: exam.name,
    question: question.name,
    what: target.kind === 'border' ? `border of ${pair}` : `${target.sizeMm} mm ${pair}`,
    border: own.kind === 'computed' ? borderWords(own.borderWidthMm, target) : own.why,
    share:
      own.kind === 'computed' && full?.kind === 'computed'
        ? percent(Math.round(100 * relativeContrastToNoise(own, full)) / 100)
        : 'not computed',
  };
}

function borderWords(widthMm: number, target: Target): string {
  if (!Number.isFinite(widthMm)) return 'no edge';
  const width = `${widthMm.toFixed(2)} mm`;
  return target.kind === 'border' ? `${width}, a caliper tolerates ${target.sizeMm} mm` : width;
}
