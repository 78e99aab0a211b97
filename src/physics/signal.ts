/** Spin-echo signal, usual form: PD (1 - exp(-TR/T1)) exp(-TE/T2). Times in ms. */
export function spinEchoSignal(s: {
  readonly t1Ms: number;
  readonly t2Ms: number;
  readonly protonDensity: number;
  readonly repetitionTimeMs: number;
  readonly echoTimeMs: number;
}): number {
  return (
    s.protonDensity *
    (1 - Math.exp(-s.repetitionTimeMs / s.t1Ms)) *
    Math.exp(-s.echoTimeMs / s.t2Ms)
  );
}

/** Spin-echo signal with the refocusing 180 counted: PD (1 - 2 exp(-(TR - TE/2)/T1) + exp(-TR/T1)) exp(-TE/T2). */
export function spinEchoSignalExact(s: Parameters<typeof spinEchoSignal>[0]): number {
  const e = Math.exp(-s.repetitionTimeMs / s.t1Ms);
  const refocused = Math.exp(-(s.repetitionTimeMs - s.echoTimeMs / 2) / s.t1Ms);
  return s.protonDensity * (1 - 2 * refocused + e) * Math.exp(-s.echoTimeMs / s.t2Ms);
}

/**
 * Inversion time that nulls a tissue, ms: T1 (ln 2 - ln(1 + exp(-TR/T1))), T1 ln 2 for an endless repeat.
 * After an echo train the recovery starts at the last echo, so TR is shortened by it.
 */
export function inversionNullMs(t1Ms: number, repetitionTimeMs = Infinity, lastEchoMs = 0): number {
  return t1Ms * (Math.LN2 - Math.log(1 + Math.exp(-(repetitionTimeMs - lastEchoMs) / t1Ms)));
}

/** Spoiled gradient echo in steady state: PD sin a (1 - E1) / (1 - E1 cos a) exp(-TE/T2*) (Ernst 1966). */
export function spoiledGradientEcho(s: {
  readonly t1Ms: number;
  readonly t2StarMs: number;
  readonly flipDeg: number;
  readonly repetitionTimeMs: number;
  readonly echoTimeMs: number;
  readonly protonDensity: number;
}): number {
  const e = Math.exp(-s.repetitionTimeMs / s.t1Ms);
  const a = (s.flipDeg * Math.PI) / 180;
  return (
    (s.protonDensity * Math.sin(a) * (1 - e) * Math.exp(-s.echoTimeMs / s.t2StarMs)) /
    (1 - e * Math.cos(a))
  );
}

/** Flip angle of the largest spoiled gradient echo signal, degrees: acos(exp(-TR/T1)) (Ernst 1966). */
export function ernstAngleDeg(t1Ms: number, repetitionTimeMs: number): number {
  return (Math.acos(Math.exp(-repetitionTimeMs / t1Ms)) * 180) / Math.PI;
}

/** Diffusion weighting exp(-b ADC) (Stejskal and Tanner 1965); b in s/mm2, ADC in mm2/s. */
export function diffusionWeight(bValueSPerMm2: number, adcMm2PerS: number): number {
  return Math.exp(-bValueSPerMm2 * adcMm2PerS);
}
