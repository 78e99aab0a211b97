import { ProblemError } from '../shared/index.js';

/** Throws ProblemError, with the way out, for a change of the list that was not made. */
export function settle(outcome: { readonly kind: string; readonly why?: string }): void {
  if (outcome.kind === 'changed' || outcome.kind === 'done') return;
  throw new ProblemError({
    code: 'owed-refused',
    thing: 'this change',
    value: outcome.why ?? outcome.kind,
    limit: 'only the newest version can be changed, and only as the rules of the list allow',
    wayOut: 'Open the list again and repeat the change if it still fits.',
  });
}
