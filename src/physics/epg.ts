import { ProblemError } from '../shared/index.js';

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

/**
 * Amplitude of each echo of a CPMG train for unit longitudinal magnetisation before excitation, by the
 * extended phase graph (Hennig 1988; Weigel 2015), T1 and T2 throughout.
 *
 * In units of half an echo spacing, magnetisation excited at the start sits in odd dephasing orders
 * at every refocusing pulse, so only orders 1, 3, 5 ... are kept; magnetisation that regrows sits in even
 * orders and never reaches an echo. Orders that cannot come back before the train ends are dropped.
 *
 * @throws ProblemError for times that are not above zero, or angles outside 0..360
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

/** Steady state over repeats: iterated until the longitudinal magnetisation before excitation changes by less than 1e-6. */
export function steadyStateEchoes(train: EchoTrain, repeat: Repeat): SteadyState {
  const unit = echoAmplitudes(train);
  const trainMs = train.refocusingDeg.length * train.echoSpacingMs;
  const inversionMs = repeat.inversion?.inversionTimeMs ?? 0;
  const freeMs = repeat.repetitionTimeMs - trainMs - inversionMs;
  if (!(freeMs >= 0)) {
    throw new ProblemError({
      code: 'train-too-long',
      thing: 'Repetition Time',
      value: `${repeat.repetitionTimeMs} ms`,
      limit: `the train takes ${trainMs} ms${inversionMs > 0 ? ` and the inversion ${inversionMs} ms` : ''}`,
      wayOut: 'Lengthen Repetition Time, or shorten the train.',
    });
  }
  const recover = (mz: number, ms: number) => 1 - (1 - mz) * Math.exp(-ms / train.t1Ms);
  const inverted = Math.cos((repeat.inversion?.flipDeg ?? 180) * (train.b1Scale ?? 1) * toRad);
  // What the train leaves is affine in what it starts with: two runs say all.
  const left0 = longitudinalLeft(train, 0);
  const gain = longitudinalLeft(train, 1) - left0;
  let mz = 1;
  let repeats = 0;
  for (let change = 1; change >= 1e-6 / 10 && repeats < 100_000; repeats++) {
    let next = recover(left0 + gain * mz, freeMs);
    if (repeat.inversion !== undefined) next = recover(next * inverted, inversionMs);
    change = Math.abs(next - mz);
    mz = next;
  }
  return { echoes: unit.map((e) => e * mz), startMz: mz, repeats };
}

/** Longitudinal magnetisation after the last echo, unit equilibrium: the even orders, which no echo sees. */
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

function checkTrain(train: EchoTrain): void {
  const times: [string, number][] = [
    ['T1', train.t1Ms],
    ['T2', train.t2Ms],
    ['echo spacing', train.echoSpacingMs],
    ['B1 scale', train.b1Scale ?? 1],
  ];
  for (const [thing, value] of times) {
    if (Number.isFinite(value) && value > 0) continue;
    throw new ProblemError({
      code: 'train-value',
      thing,
      value: String(value),
      limit: 'a number above 0',
      wayOut: 'Correct it.',
    });
  }
  for (const value of [train.excitationDeg ?? 90, ...train.refocusingDeg]) {
    if (Number.isFinite(value) && value >= 0 && value <= 360) continue;
    throw new ProblemError({
      code: 'train-value',
      thing: 'flip angle',
      value: String(value),
      limit: '0 to 360 degrees',
      wayOut: 'Correct it.',
    });
  }
}
