import type { ToleranceStatement } from '../tolerance/index.js';
import type { ConsoleEvent } from './events.js';

/** One try of a sequence and what became of it. */
export interface Try {
  readonly viewId: string;
  readonly sequenceId: string;
  readonly fromS: number;
  readonly toS: number;
  readonly outcome: 'clean' | 'moved' | 'hold failed' | 'stopped';
  /** When the breath gave out, s after the start, as it was tapped; only where a hold failed. */
  readonly heldS?: number;
}

/** Where an exam stands. Seconds since its slot began. */
export interface ConsoleState {
  readonly nowS: number;
  readonly enteredS?: number;
  readonly running?: {
    readonly viewId: string;
    readonly sequenceId: string;
    readonly sinceS: number;
  };
  readonly tries: readonly Try[];
  /** What is known of the patient now: what was said, lowered by what was seen. */
  readonly tolerance: ToleranceStatement;
  readonly injectedS?: number;
  readonly wantsOut: boolean;
  /** When the patient first wanted out, talked round or not. */
  readonly firstWantedOutS?: number;
  readonly first?: string;
  readonly dropped: ReadonlySet<string>;
  readonly ended: boolean;
  readonly endedS?: number;
}

/** A patient who moved at once is still taken to keep still this long: slices of a single-shot are shorter. */
const leastStillS = 2;
/** Time left for a patient who wants out and has not been asked for how long, s. */
const wantsOutStayS = 120;

/**
 * The state as a fold over the log. Events that were taken back count for nothing; an event that makes
 * no sense where it stands (clean with nothing running) is passed over; time never runs backwards, whatever a
 * device's clock says. The same log gives the same state.
 */
export function foldEvents(
  events: readonly ConsoleEvent[],
  said: ToleranceStatement,
): ConsoleState {
  const sorted = [...events].sort((a, b) => a.seq - b.seq);
  const taken = takenBack(sorted);
  const firstS = sorted.find((e) => Number.isFinite(e.atS))?.atS ?? 0;
  let state: ConsoleState = {
    // An exam may begin before its slot.
    nowS: Math.min(0, firstS),
    tries: [],
    tolerance: said,
    wantsOut: false,
    dropped: new Set(),
    ended: false,
  };
  for (const event of sorted) {
    const nowS = Math.max(state.nowS, Number.isFinite(event.atS) ? event.atS : state.nowS);
    state = taken.has(event.seq) ? { ...state, nowS } : step({ ...state, nowS }, event);
  }
  return state;
}

/** Sequence numbers of events that a later, standing "undone" takes back. An undone can itself be taken back. */
function takenBack(sorted: readonly ConsoleEvent[]): ReadonlySet<number> {
  const taken = new Set<number>();
  for (const event of [...sorted].reverse()) {
    if (event.kind !== 'undone' || taken.has(event.seq) || event.taken >= event.seq) continue;
    taken.add(event.taken);
  }
  return taken;
}

function step(state: ConsoleState, event: ConsoleEvent): ConsoleState {
  if (state.ended) return state;
  switch (event.kind) {
    case 'entered':
      return state.enteredS === undefined ? { ...state, enteredS: state.nowS } : state;
    case 'started':
      return {
        ...servedFirst(withoutRunning(state, 'stopped'), event.viewId),
        enteredS: state.enteredS ?? state.nowS,
        running: { viewId: event.viewId, sequenceId: event.sequenceId, sinceS: state.nowS },
      };
    case 'clean':
    case 'stopped':
      return withoutRunning(state, event.kind);
    case 'moved':
      return moved(state);
    case 'hold failed':
      return holdFailed(state, event.afterS);
    case 'injected':
      return state.injectedS === undefined ? { ...state, injectedS: state.nowS } : state;
    case 'wants out': {
      const seconds = inScannerS(state) + wantsOutStayS;
      return {
        ...state,
        wantsOut: true,
        firstWantedOutS: state.firstWantedOutS ?? state.nowS,
        tolerance: { ...state.tolerance, stay: { kind: 'stated', seconds } },
      };
    }
    case 'statement': {
      const { still, hold, stay } = event;
      const tolerance = {
        ...state.tolerance,
        ...(still === undefined ? {} : { still }),
        ...(hold === undefined ? {} : { hold }),
        ...(stay === undefined ? {} : { stay }),
      };
      return { ...state, tolerance, wantsOut: state.wantsOut && stay === undefined };
    }
    case 'put first':
      return { ...state, first: event.viewId, dropped: without(state.dropped, event.viewId) };
    case 'dropped':
      return { ...state, dropped: new Set([...state.dropped, event.viewId]) };
    case 'ended':
      return { ...withoutRunning(state, 'stopped'), ended: true, endedS: state.nowS };
    case 'undone':
      return state;
  }
}

/** Seconds the patient has spent in the scanner. */
export function inScannerS(state: ConsoleState): number {
  return state.enteredS === undefined ? 0 : state.nowS - state.enteredS;
}

function withoutRunning(
  state: ConsoleState,
  outcome: Try['outcome'],
  held: { readonly heldS?: number } = {},
): ConsoleState {
  const { running, ...rest } = state;
  if (running === undefined) return state;
  const { viewId, sequenceId, sinceS: fromS } = running;
  return {
    ...rest,
    tries: [...state.tries, { viewId, sequenceId, fromS, toS: state.nowS, outcome, ...held }],
  };
}

/** A wish to put a view first is fulfilled when it starts. */
function servedFirst(state: ConsoleState, viewId: string): ConsoleState {
  if (state.first !== viewId) return state;
  const { first, ...rest } = state;
  return rest;
}

/** Movement during a sequence shows how long the patient keeps still now; it never raises what was said. */
function moved(state: ConsoleState): ConsoleState {
  const { running, tolerance } = state;
  if (running === undefined) return state;
  const seenS = Math.max(leastStillS, state.nowS - running.sinceS);
  const saidS = tolerance.still.kind === 'stated' ? tolerance.still.seconds : Infinity;
  const still = { kind: 'stated', seconds: Math.min(saidS, seenS) } as const;
  return { ...withoutRunning(state, 'moved'), tolerance: { ...tolerance, still } };
}

function holdFailed(state: ConsoleState, afterS: number): ConsoleState {
  const { tolerance } = state;
  const seenS = Number.isFinite(afterS) ? Math.max(0, afterS) : 0;
  const saidS = tolerance.hold.kind === 'stated' ? tolerance.hold.seconds : Infinity;
  const hold = { kind: 'stated', seconds: Math.min(saidS, seenS) } as const;
  return {
    ...withoutRunning(state, 'hold failed', { heldS: seenS }),
    tolerance: { ...tolerance, hold },
  };
}

function without(set: ReadonlySet<string>, item: string): ReadonlySet<string> {
  const next = new Set(set);
  next.delete(item);
  return next;
}
