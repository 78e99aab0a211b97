import { ProblemError } from '../shared/index.js';

/**
 * Something the database refused that no caller may cause: a broken invariant. It says which rule, and
 * never the row: drivers put whole rows into their errors, and rows are about patients.
 */
export class StoreFault extends Error {
  override readonly name = 'StoreFault';
  constructor(
    readonly code: string,
    readonly rule: string,
  ) {
    super(`The database refused a statement: ${code}${rule === '' ? '' : `, rule ${rule}`}.`);
  }
}

export interface Judged {
  /** Somebody else was writing at that moment; the whole transaction may be tried again. */
  readonly tryAgain: boolean;
  readonly error: unknown;
}

/** What PostgreSQL's driver puts on its errors, as far as it is safe to look at. */
interface DriverError extends Error {
  readonly code?: unknown;
  readonly table?: unknown;
  readonly constraint?: unknown;
  readonly severity?: unknown;
}

/** Serialisation failure, deadlock, lock not available (PostgreSQL manual, appendix A). */
const tryAgainStates = new Set(['40001', '40P01', '55P03']);
const uniqueState = '23505';

/** Tells faults that pass from faults that stay, and takes the rows out of what is thrown on. */
export function judgeFault(error: unknown): Judged {
  if (!(error instanceof Error) || error instanceof ProblemError || error instanceof StoreFault) {
    return { tryAgain: false, error };
  }
  const { code, table, constraint, severity } = error as DriverError;
  if (typeof code !== 'string') return { tryAgain: false, error };
  if (code.startsWith('SQLITE_')) {
    const busy = code.startsWith('SQLITE_BUSY') || code.startsWith('SQLITE_LOCKED');
    const rule = /^\w+ constraint failed: (.*)$/.exec(error.message)?.[1] ?? '';
    const claimLost = code === 'SQLITE_CONSTRAINT_PRIMARYKEY' && rule.startsWith('claim.');
    return { tryAgain: busy || claimLost, error: new StoreFault(code, rule) };
  }
  if (typeof severity === 'string') {
    const claimLost = code === uniqueState && table === 'claim';
    const rule = typeof constraint === 'string' ? constraint : '';
    return {
      tryAgain: tryAgainStates.has(code) || claimLost,
      error: new StoreFault(code, rule),
    };
  }
  return { tryAgain: false, error };
}
