import { b1RmsMicroTesla, relativeEnergy, type RfPulse } from '../physics/index.js';
import { trainLengthOf } from './encoding.js';
import type { ScanTime } from './scan-time-types.js';
import type { PulseShape, Sequence } from './sequence.js';

/**
 * RF exposure for comparing sequences. Absolute SAR needs the coil and the patient and is not computed:
 * the scanner's own figure and the implant's label rule.
 */
export interface RfExposure {
  /** Root mean square of B1+ over the sequence, microtesla. */
  readonly b1RmsMicroTesla: number;
  /** (B0 B1rms)^2 x time, T^2 uT^2 s. */
  readonly relativeEnergy: number;
}

/** B1+rms of a sequence from its flip angles, pulse durations and shape factors over one repeat. */
export function rfExposure(sequence: Sequence, time: ScanTime): RfExposure {
  const pulse = (flipDeg: number, shape: PulseShape): RfPulse => ({ flipDeg, ...shape });
  const perSlice: RfPulse[] = [pulse(sequence.flipAngleDeg, sequence.excitationPulse)];
  if (sequence.inversionTimeMs !== undefined) perSlice.push(pulse(180, sequence.inversionPulse));
  const listed = sequence.refocusingFlipAnglesDeg;
  const refocused =
    sequence.family === 'gradient-echo'
      ? 0
      : sequence.family === 'diffusion-epi'
        ? 1
        : trainLengthOf(sequence);
  for (let n = 0; n < refocused; n++) {
    perSlice.push(pulse(listed[n] ?? listed[listed.length - 1] ?? 180, sequence.refocusingPulse));
  }
  const slices = sequence.family === 'single-shot' ? 1 : slicesInOneRepeat(sequence, time);
  const pulses = Array.from({ length: slices }, () => perSlice).flat();
  const b1Rms = b1RmsMicroTesla(pulses, time.repetitionTimeMs);
  return {
    b1RmsMicroTesla: b1Rms,
    relativeEnergy: relativeEnergy(sequence.fieldT, b1Rms, time.acquisitionS),
  };
}

const slicesInOneRepeat = (sequence: Sequence, time: ScanTime) =>
  sequence.dimensions === 3 ? 1 : Math.ceil(sequence.slices / time.passes);
