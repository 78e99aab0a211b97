import type { SpanStatement } from '../tolerance/index.js';

/** What the technologist taps, one tap each; seconds since the exam's slot began. */
export type ConsoleEvent = {
  /** Rises from event to event; the log is only ever added to. */
  readonly seq: number;
  readonly atS: number;
} & ConsoleHappening;

export type ConsoleHappening =
  | { readonly kind: 'entered' }
  | { readonly kind: 'started'; readonly viewId: string; readonly sequenceId: string }
  /** The running sequence ended and its images are clean. */
  | { readonly kind: 'clean' }
  /** The running sequence is spoiled by movement. */
  | { readonly kind: 'moved' }
  /** The breath gave out after so many seconds. */
  | { readonly kind: 'hold failed'; readonly afterS: number }
  /** The running sequence was broken off for another reason. */
  | { readonly kind: 'stopped' }
  | { readonly kind: 'injected' }
  | { readonly kind: 'wants out' }
  /** Something new was said. */
  | {
      readonly kind: 'statement';
      readonly still?: SpanStatement;
      readonly hold?: SpanStatement;
      readonly stay?: SpanStatement;
    }
  | { readonly kind: 'put first'; readonly viewId: string }
  | { readonly kind: 'dropped'; readonly viewId: string }
  | { readonly kind: 'ended' }
  /** Takes an earlier event back: a mis-tap. */
  | { readonly kind: 'undone'; readonly taken: number };
