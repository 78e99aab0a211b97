/** Those who want to hear of every commit of one open database. */
export interface Listeners {
  /** Returns what ends it. */
  readonly listen: (listener: (seq: number) => void) => () => void;
  readonly tell: (seq: number) => void;
}

export function listenersToCommits(): Listeners {
  const listeners = new Set<(seq: number) => void>();
  return {
    listen: (listener) => {
      listeners.add(listener);
      return () => void listeners.delete(listener);
    },
    // Apart from the write, so that a listener's fault is not taken for a failed write.
    tell: (seq) => {
      for (const listener of listeners) queueMicrotask(() => listener(seq));
    },
  };
}
