import { ProblemError } from '../shared/index.js';
import { checkAboveZero, checkAngle } from './epg-check.js';
import { echoAmplitudes, type EchoTrain } from './epg.js';

export interface Repeat {
  /** Excitation to excitation, ms. */
  readonly repetitionTimeMs: number;
  /** Inversion before each excitation; the time runs from inversion to excitation, ms. */
  readonly inversion?: { readonly inversionTimeMs: number; readonly flipDeg?: number };
}

export interface SteadyState {
  /** Amplitude of each echo for unit equilibrium magnetisation. */
  readonly echoes: Float64Array;
  /** Longitudinal magnetisation just before excitation. */
  readonly startMz: number;
  /** Repeats run until the change fell below 1e-6. */
  readonly repeats: number;
}

const toRad = Math.PI / 180;
const settled = 1e-6;

/**
 * Echoes of a train repeated until nothing changes. Between trains the longitudinal magnetisation
 * recovers with T1; transverse magnetisation left after a train or an inversion counts as spoiled.
 *
 * What one repeat leaves is affine in what it started with, next = offset + gain x start, so two passes
 * through the phase graph give offset and gain, and the steady state is their fixed point,
 * offset / (1 - gain), without the error that stopping an iteration leaves. `repeats` is the
 * number that the iteration from equilibrium needs until it changes by less than 1e-6.
 *
 * @throws ProblemError where the train, with the inversion before it, does not fit into the repeat
 */
export function steadyStateEchoes(train: EchoTrain, repeat: Repeat): SteadyState {
  const unit = echoAmplitudes(train);
  const freeMs = freeTimeMs(train, repeat);
  const { inversion } = repeat;
  const recover = (mz: number, ms: number) => 1 - (1 - mz) * Math.exp(-ms / train.t1Ms);
  const inverted = Math.cos((inversion?.flipDeg ?? 180) * (train.b1Scale ?? 1) * toRad);
  const next = (mz: number) => {
    const rested = recover(longitudinalLeft(train, mz), freeMs);
    return inversion === undefined ? rested : recover(rested * inverted, inversion.inversionTimeMs);
  };
  const offset = next(0);
  const gain = next(1) - offset;
  // A gain of 1 is a train without effect and without relaxation: equilibrium stays.
  const startMz = gain > 1 - 1e-13 ? 1 : offset / (1 - gain);
  const firstChange = Math.abs(offset + gain - 1);
  const repeats =
    firstChange < settled || gain === 0
      ? 1
      : 1 + Math.ceil(Math.log(settled / firstChange) / Math.log(Math.abs(gain)));
  return { echoes: unit.map((e) => e * startMz), startMz, repeats };
}

/** Time between the last echo and the next inversion or excitation, ms. */
function freeTimeMs(train: EchoTrain, { repetitionTimeMs, inversion }: Repeat): number {
  checkAboveZero('Repetition Time', repetitionTimeMs, 'ms');
  if (inversion !== undefined) {
    checkAboveZero('Inversion Time', inversion.inversionTimeMs, 'ms');
    checkAngle('inversion flip angle', inversion.flipDeg ?? 180);
  }
  const trainMs = train.refocusingDeg.length * train.echoSpacingMs;
  const inversionMs = inversion?.inversionTimeMs ?? 0;
  const freeMs = repetitionTimeMs - trainMs - inversionMs;
  if (freeMs > -1e-9) return Math.max(0, freeMs);
  throw new ProblemError({
    code: 'train-too-long',
    thing: 'Repetition Time',
    value: `${repetitionTimeMs} ms`,
    limit: `the train takes ${trainMs} ms${inversionMs > 0 ? ` and the inversion ${inversionMs} ms` : ''}`,
    wayOut: 'Lengthen Repetition Time, or shorten the train.',
  });
}

/**
 * Longitudinal magnetisation after the last echo, unit equilibrium. In units of half an echo spacing it
 * sits, with what grows back, in the even dephasing orders at every pulse, apart from the excited part
 * (odd orders), so the two never mix and echoes need not know of it. Orders that cannot come back to zero
 * before the train ends are dropped.
 */
function longitudinalLeft(train: EchoTrain, startMz: number): number {
  const { t1Ms, t2Ms, echoSpacingMs, refocusingDeg } = train;
  const b1 = train.b1Scale ?? 1;
  const count = refocusingDeg.length;
  const e1 = Math.exp(-echoSpacingMs / t1Ms);
  const e2 = Math.exp(-echoSpacingMs / t2Ms);
  const half = Math.exp(-echoSpacingMs / 2 / t1Ms);
  const size = Math.ceil(count / 2) + 3;
  const up = new Float64Array(size);
  const down = new Float64Array(size);
  const along = new Float64Array(size);
  along[0] = startMz * Math.cos((train.excitationDeg ?? 90) * b1 * toRad) * half + 1 - half;
  for (let n = 0; n < count; n++) {
    const angle = (refocusingDeg[n] ?? 0) * b1 * toRad;
    const cosine = Math.cos(angle);
    const sine = Math.sin(angle);
    const c2 = (1 + cosine) / 2;
    const s2 = (1 - cosine) / 2;
    const orders = Math.min(n + 1, count - n + 1, size - 1);
    for (let k = 0; k < orders; k++) {
      const f = up[k]!;
      const g = down[k]!;
      const z = along[k]!;
      up[k] = (c2 * f - s2 * g + sine * z) * e2;
      down[k] = (c2 * g - s2 * f + sine * z) * e2;
      along[k] = (-0.5 * sine * (f + g) + cosine * z) * e1;
    }
    if (n === count - 1) return (along[0]! / e1) * half + 1 - half;
    along[0] = along[0]! + 1 - e1;
    const back = down[1] ?? 0;
    up.copyWithin(1, 0, orders);
    down.copyWithin(0, 1, orders + 1);
    // Order 0: what comes down from order 1 is its own mirror.
    up[0] = back;
    down[0] = back;
    down[orders] = 0;
  }
  return along[0]!;
}
