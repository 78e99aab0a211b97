import type { FieldT } from './field.js';

export interface NoiseFactors {
  readonly voxelMm3: number;
  /** Lines acquired per average, partial Fourier and parallel imaging already counted. */
  readonly acquiredLines: number;
  readonly averages: number;
  readonly readoutMs: number;
  readonly fieldT: FieldT;
  readonly parallelFactor: number;
  readonly geometryFactor: number;
  readonly partialFourierFraction: number;
  readonly partitions?: number;
}

/**
 * Noise over the signal of one fully relaxed cubic millimetre, in a fixed arbitrary unit:
 * g / (B0 x voxel x sqrt(lines x averages x readout)) (Edelstein 1986; Macovski 1996). Fewer lines carry
 * the sqrt(R) of parallel imaging and the sqrt of partial Fourier by themselves, so neither enters again;
 * only the geometry factor does (Pruessmann 1999).
 */
export function relativeNoise(f: NoiseFactors): number {
  const samples = f.acquiredLines * f.averages * f.readoutMs * (f.partitions ?? 1);
  return f.geometryFactor / (f.fieldT * f.voxelMm3 * Math.sqrt(samples));
}
