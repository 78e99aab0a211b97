import { foldEvents, replan, type ConsoleEvent, type ConsoleExam } from '../../console/index.js';
import { chanceWords } from './day-board.js';

/** Where an exam at the scanner stands, in words. */
export function consolePage(
  exam: ConsoleExam,
  events: readonly ConsoleEvent[],
  slotS: number,
  nowS: number,
) {
  const said = exam.request.tolerance;
  const state = foldEvents(events, said);
  // Minutes go by between taps: the rest is planned from now, not from the last tap.
  const planned = replan(exam, { ...state, nowS: Math.max(state.nowS, nowS) }, slotS);
  const taken = new Set(events.flatMap((e) => (e.kind === 'undone' ? [e.taken] : [])));
  const lastTap = [...events].reverse().find((e) => e.kind !== 'undone' && !taken.has(e.seq));
  const nameOf = (sequenceId: string) =>
    exam.ground.library.sequences.get(sequenceId)?.get(exam.scanner.fieldT)?.name ?? sequenceId;
  const running =
    state.running === undefined
      ? undefined
      : { ...state.running, name: nameOf(state.running.sequenceId) };
  const [next, ...later] = planned.next.map((step) => ({
    ...step,
    chance: step.cleanChance === undefined ? '' : chanceWords(step.cleanChance),
    takes: minSec(step.takesS),
    starts: minSec(step.inS),
  }));
  return {
    state,
    planned,
    running,
    next,
    later,
    lastSeq: events[events.length - 1]?.seq ?? 0,
    ...(lastTap === undefined
      ? {}
      : { lastTap: { seq: lastTap.seq, words: tapWords(lastTap, nameOf) } }),
    tries: state.tries.map((t) => ({
      name: nameOf(t.sequenceId),
      outcome: t.outcome,
      at: minSec(t.fromS),
    })),
    needsContrast:
      exam.exam.views.some((v) => v.contrast === 'after') && exam.request.contrast === 'approved',
    waits: planned.nextPatientWaitsS < 30 ? '' : `${Math.ceil(planned.nextPatientWaitsS / 60)} min`,
    lost: planned.lostIfStopped,
    counted: `${spanWords('still', state.tolerance.still)}, ${spanWords('breath', state.tolerance.hold)}`,
  };
}

function tapWords(event: ConsoleEvent, nameOf: (id: string) => string): string {
  switch (event.kind) {
    case 'started':
      return `started ${nameOf(event.sequenceId)}`;
    case 'hold failed':
      return `hold failed after ${Math.round(event.afterS)} s`;
    case 'statement':
      return 'new statement';
    default:
      return event.kind;
  }
}

const spanWords = (of: string, span: { readonly kind: string; readonly seconds?: number }) =>
  span.kind === 'stated' ? `${of} for ${Math.round(span.seconds ?? 0)} s` : `${of}: not asked`;

function minSec(seconds: number): string {
  const whole = Math.max(0, Math.round(seconds));
  return `${Math.floor(whole / 60)}:${String(whole % 60).padStart(2, '0')}`;
}
