import {
  diffusionWeight,
  echoAmplitudes,
  lineWeights,
  spoiledGradientEcho,
  steadyStateEchoes,
  type Tissue,
} from '../physics/index.js';
import { encodingOf, phaseLinesOf, trainLengthOf } from './encoding.js';
import { radialWeights } from './radial-weights.js';
import type { Sequence } from './sequence.js';

/** Signal of one tissue on every phase-encode line, or why published equations do not carry that far. */
export type LineSignal =
  | {
      readonly kind: 'computed';
      readonly weights: Float64Array;
      readonly remarks: readonly string[];
    }
  | { readonly kind: 'not computed'; readonly why: string };

const notComputed = (why: string): LineSignal => ({ kind: 'not computed', why });

/**
 * Weight of every phase-encode line for a tissue: proton density, recovery over repeats, preparation,
 * refocusing (extended phase graph), decay along the train, fat suppression. Unit: fraction of the
 * signal of fully relaxed water at excitation. Spin echo, fast spin echo and single-shot in full;
 * gradient echo and diffusion by their closed forms; in/opposed phase and inflow are not computed.
 */
export function lineSignal(sequence: Sequence, tissue: Tissue): LineSignal {
  switch (sequence.family) {
    case 'gradient-echo':
      return gradientEchoSignal(sequence, tissue);
    case 'diffusion-epi':
      return diffusionSignal(sequence, tissue);
    default:
      return {
        kind: 'computed',
        weights: scaled(
          refocusedWeights(sequence, tissue),
          tissue.protonDensity * fatLeft(sequence, tissue),
        ),
        remarks: [],
      };
  }
}

/** Amplitude of each echo of the sequence's train for a tissue, for unit proton density. */
export function trainEchoes(sequence: Sequence, tissue: Tissue): Float64Array {
  const length = trainLengthOf(sequence);
  const listed = sequence.refocusingFlipAnglesDeg;
  const last = listed[listed.length - 1] ?? 180;
  const train = {
    t1Ms: tissue.t1Ms,
    t2Ms: tissue.t2Ms,
    echoSpacingMs: sequence.echoSpacingMs,
    refocusingDeg: Array.from({ length }, (_, n) => listed[n] ?? last),
    excitationDeg: sequence.flipAngleDeg,
  };
  const inversion =
    sequence.inversionTimeMs === undefined
      ? {}
      : { inversion: { inversionTimeMs: sequence.inversionTimeMs } };
  if (sequence.family !== 'single-shot' || sequence.averages > 1) {
    const oneSliceMs = sequence.repetitionTimeMs;
    const repetitionTimeMs =
      sequence.family === 'single-shot' ? oneSliceMs * sequence.slices : oneSliceMs;
    return magnitude(steadyStateEchoes(train, { repetitionTimeMs, ...inversion }).echoes);
  }
  const echoes = echoAmplitudes(train);
  if (sequence.inversionTimeMs === undefined) return echoes;
  const startMz = 1 - 2 * Math.exp(-sequence.inversionTimeMs / tissue.t1Ms);
  return magnitude(scaled(echoes, startMz));
}

function refocusedWeights(sequence: Sequence, tissue: Tissue): Float64Array {
  const echoes = trainEchoes(sequence, tissue);
  if (sequence.family === 'radial-fast-spin-echo') {
    return radialWeights(echoes, phaseLinesOf(sequence));
  }
  return lineWeights(encodingOf(sequence), echoes);
}

function gradientEchoSignal(sequence: Sequence, tissue: Tissue): LineSignal {
  if (sequence.weighting === 'in-opposed-phase') {
    return notComputed('in/opposed-phase contrast rests on fat fraction, which no target carries');
  }
  if (sequence.weighting === 'inflow') {
    return notComputed('inflow enhancement depends on flow, which is not modelled');
  }
  if (tissue.t2StarMs === undefined && sequence.echoTimeMs > 5) {
    return notComputed(`no T2* is known for ${tissue.name} at ${sequence.fieldT} T`);
  }
  const signal = spoiledGradientEcho({
    t1Ms: tissue.t1Ms,
    t2StarMs: tissue.t2StarMs ?? tissue.t2Ms,
    flipDeg: sequence.flipAngleDeg,
    repetitionTimeMs: sequence.repetitionTimeMs,
    echoTimeMs: sequence.echoTimeMs,
    protonDensity: tissue.protonDensity,
  });
  return {
    kind: 'computed',
    weights: new Float64Array(phaseLinesOf(sequence)).fill(signal * fatLeft(sequence, tissue)),
    remarks: [
      'spoiled gradient echo by its steady-state equation; susceptibility distortion is not modelled',
    ],
  };
}

function diffusionSignal(sequence: Sequence, tissue: Tissue): LineSignal {
  if (tissue.adcMm2PerS === undefined) {
    return notComputed(`no diffusion coefficient is known for ${tissue.name}`);
  }
  const strongest = Math.max(0, ...sequence.bValuesSPerMm2);
  const signal =
    tissue.protonDensity *
    (1 - Math.exp(-sequence.repetitionTimeMs / tissue.t1Ms)) *
    Math.exp(-sequence.echoTimeMs / tissue.t2Ms) *
    diffusionWeight(strongest, tissue.adcMm2PerS) *
    fatLeft(sequence, tissue);
  const plan = encodingOf(sequence);
  const t2StarMs = tissue.t2StarMs ?? tissue.t2Ms;
  const echoes = Float64Array.from(
    { length: plan.echoTrainLength },
    (_, echo) => signal * Math.exp(-((echo - plan.centreEcho) * sequence.echoSpacingMs) / t2StarMs),
  );
  return {
    kind: 'computed',
    weights: lineWeights(plan, echoes),
    remarks: [
      `read at b = ${strongest} s/mm2; distortion and the chance of movement between directions are not modelled`,
    ],
  };
}

/** Part of the signal left by spectral fat suppression. Inversion acts through the recovery itself. */
export function fatLeft(sequence: Sequence, tissue: Tissue): number {
  if (sequence.fatSuppression !== 'spectral') return 1;
  return 1 - (tissue.fatFraction ?? 0) * (1 - sequence.fatResidual);
}

const scaled = (values: Float64Array, factor: number) => values.map((v) => v * factor);

/** Magnitude images: the sign that an inversion leaves is lost, the same for the whole train. */
function magnitude(echoes: Float64Array): Float64Array {
  return (echoes[0] ?? 0) < 0 ? scaled(echoes, -1) : echoes;
}
