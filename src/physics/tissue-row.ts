import type { FieldT } from './field.js';

/** One tissue at one field. T1, T2, T2* in ms; proton density relative to water; ADC in mm2/s. */
export interface Tissue {
  readonly name: string;
  readonly t1Ms: number;
  readonly t2Ms: number;
  readonly t2StarMs?: number;
  readonly protonDensity: number;
  readonly adcMm2PerS?: number;
  /** Part of the signal that is fat, 0..1. */
  readonly fatFraction?: number;
  readonly source: string;
  readonly basis: 'published' | 'from memory' | 'assumption';
}

/** One row of a tissue table: what is common to both fields, and T1, T2 with their source at each. */
export interface TissueRow {
  readonly name: string;
  readonly protonDensity: number;
  readonly adcMm2PerS?: number;
  readonly fatFraction?: number;
  /** Remarks on proton density, ADC and fat, added to the source. */
  readonly about: string;
  readonly at: Partial<
    Record<FieldT, Pick<Tissue, 't1Ms' | 't2Ms' | 't2StarMs' | 'basis' | 'source'>>
  >;
}
