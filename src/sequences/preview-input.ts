import { phantomTissues, tissueAt, type Phantom, type PreviewScan } from '../physics/index.js';
import { encodingOf } from './encoding.js';
import { fatLeft, trainEchoes } from './line-weights.js';
import { hasEchoTrain, type Sequence } from './sequence.js';

/** What a preview needs of a sequence, or why it cannot be drawn. */
export type PreviewInput =
  | { readonly kind: 'scan'; readonly scan: PreviewScan }
  | { readonly kind: 'not drawn'; readonly why: string };

/**
 * A sequence's acquisition as the preview takes it: which echo fills which line when, and the signal of each echo
 * per tissue of the phantom. Spin echo and echo trains on a line grid, one slice at a time. Not drawn: blades,
 * gradient echo, diffusion, slabs encoded in three dimensions, and images after contrast medium, which the phantom's
 * tissues do not take up. The sign that an inversion leaves is lost tissue by tissue, as in `trainEchoes`.
 *
 * @param noise standard deviation of the image's noise, in the unit of the signals
 */
export function previewInput(sequence: Sequence, phantom: Phantom, noise: number): PreviewInput {
  if (sequence.family === 'radial-fast-spin-echo') {
    return { kind: 'not drawn', why: 'rotating blades have no line grid' };
  }
  if (sequence.contrast === 'after') {
    return { kind: 'not drawn', why: 'the phantom takes up no contrast medium' };
  }
  if (sequence.dimensions === 3) {
    return { kind: 'not drawn', why: 'only single slices are simulated, no slab' };
  }
  if (!hasEchoTrain(sequence) && sequence.family !== 'spin-echo') {
    return { kind: 'not drawn', why: 'only spin echo and echo trains are simulated as images' };
  }
  const echoesOf = new Map(
    phantomTissues(phantom).map((name) => {
      const tissue = tissueAt(name, sequence.fieldT);
      const factor = tissue.protonDensity * fatLeft(sequence, tissue);
      return [name, trainEchoes(sequence, tissue).map((echo) => echo * factor)] as const;
    }),
  );
  return {
    kind: 'scan',
    scan: {
      plan: encodingOf(sequence),
      phaseAlong: 'x',
      fovPhaseMm: sequence.fovPhaseMm * (1 + sequence.oversamplingPhase),
      fovFrequencyMm: sequence.fovFrequencyMm,
      frequencySamples: sequence.matrixFrequency,
      echoSpacingMs: sequence.echoSpacingMs,
      repetitionTimeMs: sequence.repetitionTimeMs,
      averages: Math.max(1, Math.round(sequence.averages)),
      echoesOf,
      noise,
    },
  };
}
