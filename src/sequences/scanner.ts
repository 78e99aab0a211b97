import type { FieldT } from '../physics/index.js';

/** What a scanner must be able to do for a sequence or an exam. */
export interface ScannerAbilities {
  readonly id: string;
  readonly name: string;
  readonly fieldT: FieldT;
  readonly boreCm: number;
  /** Receiver coils it has. */
  readonly coils: readonly string[];
}
