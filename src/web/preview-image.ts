import { encode } from 'fast-png';
import { headPhantom, previewImage, type Movement, type PreviewImage } from '../physics/index.js';
import { noiseOf, previewInput, type Sequence } from '../sequences/index.js';

/** Side of the picture shown, mm and pixels. */
const frame = { columns: 240, rows: 240, widthMm: 200, heightMm: 200 };

/**
 * Noise of the full-quality picture, in the unit of the signals: grey matter of a T2 picture then stands about
 * forty times above it. An assumption; between pictures the ratio of noises is the computed one.
 */
const fullQualityNoise = 0.006;

/** A shift and a turn half-way through, in the plane of the slice. Assumed for the picture only. */
export const shownMovement = { shiftXMm: 2, shiftYMm: 4, turnDeg: 5 } as const;

export type Picture =
  | { readonly kind: 'picture'; readonly png: Uint8Array }
  | { readonly kind: 'not drawn'; readonly why: string };

/**
 * Simulated picture of a head phantom by a sequence, as PNG, 8 bits of grey. White is each picture's own
 * brightest half percent, as a reader would set the window; noise is seen against that.
 *
 * @param reference full-quality sequence whose noise sets the scale
 * @param random uniform in [0, 1)
 */
export function pictureOf(
  sequence: Sequence,
  reference: Sequence,
  moved: boolean,
  random: () => number,
): Picture {
  const noise = (fullQualityNoise * noiseOf(sequence)) / noiseOf(reference);
  const input = previewInput(sequence, headPhantom, noise);
  if (input.kind === 'not drawn') return input;
  const { scan } = input;
  const endMs = scan.plan.shots * scan.repetitionTimeMs * scan.averages;
  const movement: Movement = { atMs: endMs / 2, ...shownMovement };
  const image = previewImage(headPhantom, scan, frame, { random, ...(moved ? { movement } : {}) });
  return { kind: 'picture', png: greyPng(image) };
}

function greyPng({ columns, rows, values }: PreviewImage): Uint8Array {
  const sorted = Float64Array.from(values).sort();
  const white = sorted[Math.floor(0.995 * (sorted.length - 1))] || 1;
  const data = Uint8Array.from(values, (v) =>
    Math.max(0, Math.min(255, Math.round((255 * v) / white))),
  );
  return encode({ width: columns, height: rows, data, channels: 1, depth: 8 });
}
