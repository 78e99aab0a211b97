import type { FieldT } from './field.js';

/** Main fat peak below water, parts per million (common practice), times protons' 42.577 MHz/T. */
const shiftHzPerT = 3.4 * 42.577;

/** Frequency between water and the main fat peak, Hz: 217 at 1.5 T, 434 at 3 T. */
export function waterFatShiftHz(fieldT: FieldT): number {
  return shiftHzPerT * fieldT;
}

/** First echo time at which water and fat stand against each other, ms; in phase at twice that. */
export function opposedPhaseEchoTimeMs(fieldT: FieldT): number {
  return 1000 / (2 * waterFatShiftHz(fieldT));
}

/**
 * Signal of a gradient echo from water and fat in one voxel, as a fraction of their sum without decay:
 * |(1 - f) + f exp(i 2 pi df TE)| exp(-TE/T2*) (Dixon 1984, fat as one peak). In phase 1, opposed |1 - 2 f|.
 * T1 weighting is that of the tissue as a whole and enters elsewhere.
 *
 * @param fatFraction part of the signal that is fat, 0..1
 * @param t2StarMs decay common to both; without it none
 */
export function waterFatSignal(s: {
  readonly fatFraction: number;
  readonly fieldT: FieldT;
  readonly echoTimeMs: number;
  readonly t2StarMs?: number;
}): number {
  const phase = 2 * Math.PI * waterFatShiftHz(s.fieldT) * s.echoTimeMs * 1e-3;
  const water = 1 - s.fatFraction;
  const together = Math.hypot(
    water + s.fatFraction * Math.cos(phase),
    s.fatFraction * Math.sin(phase),
  );
  return together * Math.exp(-s.echoTimeMs / (s.t2StarMs ?? Infinity));
}
