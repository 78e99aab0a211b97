import type { FieldT } from './field.js';

export interface RfPulse {
  readonly flipDeg: number;
  readonly durationMs: number;
  /** Mean square over squared mean of the envelope; 1 for a hard pulse. */
  readonly shapeFactor: number;
}

/** Proton gyromagnetic ratio, rad / (s T) (CODATA). */
const gamma = 267.522_187_44e6;

/**
 * Root mean square of B1+ over a window, microtesla. A pulse of flip a and duration t has a mean B1 of
 * a / (gamma t): 11.74 microtesla for a hard 180 of 1 ms. Absolute SAR is not computed: it needs
 * coil and patient, and the scanner's own figure rules.
 */
export function b1RmsMicroTesla(pulses: readonly RfPulse[], windowMs: number): number {
  let sum = 0;
  for (const { flipDeg, durationMs, shapeFactor } of pulses) {
    const meanMicroTesla = ((flipDeg * Math.PI) / 180 / (gamma * durationMs * 1e-3)) * 1e6;
    sum += shapeFactor * meanMicroTesla ** 2 * durationMs;
  }
  return Math.sqrt(sum / windowMs);
}

/** (B0 B1rms)^2 x time, T^2 uT^2 s: for comparing sequences only. */
export function relativeEnergy(fieldT: FieldT, b1Rms: number, durationS: number): number {
  return (fieldT * b1Rms) ** 2 * durationS;
}
