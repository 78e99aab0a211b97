import type { Scanner } from '../../day/index.js';
import type { AdviceRow } from '../advice-table.js';
import type { Comparison } from '../compare.js';
import type { Scenario } from '../scenario.js';
import type { AdviceAsked } from '../slot-advice.js';

/**
 * Requests on record, as JSON: thousands of them as text are handed over in a fifth of the time that as objects the sender would
 * be held up for.
 */
export type RequestsAsText = string;

/** What the month thread is asked; `id` is the asker's. */
export type DeskAsked =
  | {
      readonly kind: 'compare';
      readonly id: number;
      readonly scenarios: readonly Scenario[];
      readonly requests: RequestsAsText;
      readonly threads: number;
      /** Address of the compiled thread, where it is not beside the pool. */
      readonly workerFile?: string;
    }
  | {
      readonly kind: 'advice';
      readonly id: number;
      readonly requests: RequestsAsText;
      readonly scanners: readonly Scanner[];
      readonly asked: AdviceAsked & { readonly quickLooks: boolean };
    };

export type DeskMessage = DeskAsked | { readonly kind: 'stop'; readonly id: number };

/** What it says: how far it is, and in the end what came of it. */
export type DeskAnswer =
  | ({ readonly kind: 'planned' } & HowFar)
  | ({ readonly kind: 'month' } & HowFar)
  | {
      readonly kind: 'done';
      readonly id: number;
      readonly value: Comparison | readonly AdviceRow[];
    }
  | { readonly kind: 'failed'; readonly id: number; readonly why: string };

interface HowFar {
  readonly id: number;
  readonly done: number;
  readonly of: number;
}
