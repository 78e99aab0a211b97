import { voxelOf, type Family, type Sequence } from './sequence.js';

/** Published or site limits on how something is acquired. */
export interface AcquisitionLimits {
  readonly sliceThicknessMm?: number;
  readonly sliceGapMm?: number;
  readonly pixelAreaMm2?: number;
  readonly pixelPhaseMm?: number;
  readonly pixelFrequencyMm?: number;
  /** Kinds of acquisition a published rule does not accept. */
  readonly notAccepted?: readonly {
    readonly family: Family;
    readonly dimensions?: 2 | 3;
    readonly source: string;
  }[];
  readonly source: string;
}

/** One limit held against a sequence. */
export interface LimitCheck {
  readonly what: string;
  readonly value: number;
  readonly limit: number;
  readonly unit: string;
  readonly met: boolean;
}

const slack = 1e-9;

/** Every geometric limit held against the sequence's own slice and acquired pixel (FOV over steps). */
export function checkLimits(sequence: Sequence, limits: AcquisitionLimits): readonly LimitCheck[] {
  const voxel = voxelOf(sequence);
  const rows: [string, number, number | undefined, string][] = [
    ['slice thickness', voxel.sliceMm, limits.sliceThicknessMm, 'mm'],
    ['slice gap', sequence.sliceGapMm, limits.sliceGapMm, 'mm'],
    ['pixel area', voxel.pixelAreaMm2, limits.pixelAreaMm2, 'mm2'],
    ['pixel, phase direction', voxel.phaseMm, limits.pixelPhaseMm, 'mm'],
    ['pixel, frequency direction', voxel.frequencyMm, limits.pixelFrequencyMm, 'mm'],
  ];
  return rows.flatMap(([what, value, limit, unit]) =>
    limit === undefined ? [] : [{ what, value, limit, unit, met: value <= limit + slack }],
  );
}

/** The published rule that does not accept this kind of acquisition, if any. */
export function refusalOf(
  sequence: Sequence,
  limits: AcquisitionLimits,
): NonNullable<AcquisitionLimits['notAccepted']>[number] | undefined {
  return limits.notAccepted?.find(
    (rule) =>
      rule.family === sequence.family &&
      (rule.dimensions === undefined || rule.dimensions === sequence.dimensions),
  );
}
