import type { FieldT } from '../physics/index.js';

/** The field asked for in an address; 3 T where it says nothing known. */
export const fieldOf = (asked: unknown): FieldT => (asked === '1.5' ? 1.5 : 3);
