import { checkTrain } from './epg-check.js';

/** A CPMG echo train. Angles in degrees, times in ms. */
export interface EchoTrain {
  readonly t1Ms: number;
  readonly t2Ms: number;
  readonly echoSpacingMs: number;
  /** One refocusing angle per echo. */
  readonly refocusingDeg: readonly number[];
  /** Default 90. */
  readonly excitationDeg?: number;
  /** Default 1; scales every pulse, the excitation included. */
  readonly b1Scale?: number;
}

const toRad = Math.PI / 180;

/**
 * Amplitude of each echo of a CPMG train for unit longitudinal magnetisation before excitation, by the
 * extended phase graph (Hennig 1988; Weigel 2015), T1 and T2 throughout.
 *
 * In units of half an echo spacing, magnetisation excited at the start sits in odd dephasing orders
 * at every refocusing pulse, so only orders 1, 3, 5 ... are kept; magnetisation that regrows sits in even
 * orders and never reaches an echo. Orders that cannot come back before the train ends are dropped.
 *
 * @throws ProblemError for a train without echoes, times that are not above zero, or angles outside 0..360
 */
export function echoAmplitudes(train: EchoTrain): Float64Array {
  checkTrain(train);
  const { t1Ms, t2Ms, echoSpacingMs, refocusingDeg } = train;
  const b1 = train.b1Scale ?? 1;
  const count = refocusingDeg.length;
  const e1 = Math.exp(-echoSpacingMs / t1Ms);
  const e2 = Math.exp(-echoSpacingMs / t2Ms);
  const half = Math.exp(-echoSpacingMs / 2 / t2Ms);
  const echoes = new Float64Array(count);
  const size = Math.ceil(count / 2) + 2;
  const up = new Float64Array(size);
  const down = new Float64Array(size);
  const along = new Float64Array(size);
  up[0] = Math.sin((train.excitationDeg ?? 90) * b1 * toRad) * half;
  for (let n = 0; n < count; n++) {
    const angle = (refocusingDeg[n] ?? 0) * b1 * toRad;
    const cosine = Math.cos(angle);
    const sine = Math.sin(angle);
    const c2 = (1 + cosine) / 2;
    const s2 = (1 - cosine) / 2;
    const orders = Math.min(n + 1, count - n, size - 1);
    for (let k = 0; k < orders; k++) {
      const f = up[k]!;
      const g = down[k]!;
      const z = along[k]!;
      up[k] = (c2 * f + s2 * g + sine * z) * e2;
      down[k] = (s2 * f + c2 * g - sine * z) * e2;
      along[k] = (0.5 * sine * (g - f) + cosine * z) * e1;
    }
    echoes[n] = (down[0]! / e2) * half;
    const first = down[0]!;
    up.copyWithin(1, 0, orders);
    up[0] = first;
    down.copyWithin(0, 1, orders);
    down[orders - 1] = 0;
  }
  return echoes;
}
