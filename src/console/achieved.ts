import { sequenceAt, type SitePolicy } from '../exams/index.js';
import {
  scanTime,
  untroubledBreathing,
  type ScanTime,
  type ScanTimeOptions,
  type Sequence,
} from '../sequences/index.js';
import {
  entryGroup,
  groupOf,
  profileOf,
  type AchievedRecord,
  type SpanKind,
} from '../tolerance/index.js';
import type { ConsoleState, Try } from './fold.js';
import type { ConsoleExam } from './remaining.js';

/** What is known of an exam beside its log. */
export interface ExamCircumstances {
  /** ISO date of the day it is recorded. */
  readonly on: string;
  /** When getting in could begin, s on the exam's clock: 0 or a later arrival. Absent: the clock was not the slot's. */
  readonly entryFromS?: number;
  /** Time planned from then to the end of the last sequence, s. */
  readonly plannedS?: number;
}

/**
 * What a finished exam showed of stillness, breath-hold, bearing and time, at most one record a kind. Held against what
 * was said BEFORE the exam (the request's own statement), not against what taps during it made of that.
 *
 * @param state the fold of the exam's whole log
 */
export function achievedFrom(
  console: ConsoleExam,
  state: ConsoleState,
  around: ExamCircumstances,
): readonly AchievedRecord[] {
  const tried = timedTries(console, state);
  const seen: Readonly<Record<SpanKind, Seen | undefined>> = {
    still: stillSeen(tried, console.ground.library.policy),
    hold: holdSeen(tried),
    stay: staySeen(state),
  };
  return [
    ...Object.entries(seen).flatMap(([kind, one]) =>
      one === undefined ? [] : [spanRecord(kind as SpanKind, one, console, around)],
    ),
    ...entryRecord(console, state, around),
    ...examRecord(console, state, around),
  ];
}

interface Seen {
  readonly seconds: number;
  readonly censored: boolean;
}

interface TimedTry extends Try {
  readonly sequence: Sequence;
  readonly time: ScanTime;
}

/** Tries with their sequence as it was planned for what was said; what the library no longer has is passed over. */
function timedTries({ ground, scanner, request }: ConsoleExam, state: ConsoleState): TimedTry[] {
  const { library } = ground;
  const { policy } = library;
  const options: ScanTimeOptions = {
    ability: {
      holdSpanS: profileOf(request.tolerance, policy).holdSpanS,
      breathsPerMinute: policy.breathing.breathsPerMinute.value,
    },
    rules: policy.breathing.value,
  };
  return state.tries.flatMap((attempt) => {
    const sequence = sequenceAt(library, attempt.sequenceId, scanner.fieldT);
    if (sequence === undefined) return [];
    const planned = scanTime(sequence, options);
    const time = planned.kind === 'possible' ? planned : scanTime(sequence, untroubledBreathing);
    return time.kind === 'possible' ? [{ ...attempt, sequence, time }] : [];
  });
}

/**
 * Time kept still until the first movement, over the whole exam. Counted is what had to be still, as planned: an
 * acquisition in one piece counts in full, one that is taken slice by slice only the sum of its slices, because between
 * slices nobody asks for stillness. Pieces are added up because a plan asks each of them of the same hazard, and the priors
 * speak of a whole exam ("25 min still"), which no single piece lasts. Where rotating blades correct a part of the
 * movements, a clean image shows only the rest of the time still. A piece that ran shorter than planned counts for what
 * the clock shows; a movement seen only in the images is dated by its tap.
 */
function stillSeen(tried: readonly TimedTry[], policy: SitePolicy): Seen | undefined {
  let seconds = 0;
  for (const attempt of tried) {
    const { time, sequence, outcome } = attempt;
    const { count, lengthS } = time.intervals;
    const ran = Math.min(1, (attempt.toS - attempt.fromS) / time.acquisitionS);
    const shown =
      sequence.family === 'radial-fast-spin-echo' ? 1 - policy.movement.bladesCorrect.value : 1;
    seconds += ran * count * lengthS * shown;
    if (outcome === 'moved') return { seconds, censored: false };
  }
  return seconds > 0 ? { seconds, censored: true } : undefined;
}

/**
 * The hold at which the breath first gave out, or the longest that was asked and kept. Where a sequence takes several holds,
 * the time since its start tells which one failed: holds and rests follow each other as planned.
 */
function holdSeen(tried: readonly TimedTry[]): Seen | undefined {
  let longest = 0;
  for (const attempt of tried) {
    if (attempt.sequence.breathing !== 'held') continue;
    const { count, lengthS } = attempt.time.intervals;
    const ranS = attempt.toS - attempt.fromS;
    if (attempt.outcome === 'hold failed') {
      const tappedS = attempt.heldS !== undefined && attempt.heldS > 0 ? attempt.heldS : ranS;
      const roundS = count > 1 ? (attempt.time.acquisitionS - lengthS) / (count - 1) : Infinity;
      const kept = Math.min(count - 1, Math.floor(tappedS / roundS));
      return {
        seconds: Math.min(lengthS, tappedS - (kept > 0 ? kept * roundS : 0)),
        censored: false,
      };
    }
    longest = Math.max(longest, Math.min(lengthS, ranS));
  }
  return longest > 0 ? { seconds: longest, censored: true } : undefined;
}

/** Time in the scanner, from the first start on as the console counts it, until the patient first wanted out. */
function staySeen(state: ConsoleState): Seen | undefined {
  const { enteredS, firstWantedOutS } = state;
  // Before the first sequence the localiser runs: wanting out then is an event at its start.
  if (firstWantedOutS !== undefined)
    return {
      seconds: Math.max(0, firstWantedOutS - (enteredS ?? firstWantedOutS)),
      censored: false,
    };
  if (enteredS === undefined) return undefined;
  return { seconds: Math.max(0, (state.endedS ?? state.nowS) - enteredS), censored: true };
}

function spanRecord(
  kind: SpanKind,
  seen: Seen,
  { request, ground }: ConsoleExam,
  { on }: ExamCircumstances,
): AchievedRecord {
  const said = request.tolerance[kind];
  return {
    kind,
    group: groupOf(kind, request.tolerance, ground.library.policy).group,
    ...rounded(seen),
    ...(said.kind === 'stated' ? { statedS: said.seconds, saidBy: request.tolerance.saidBy } : {}),
    on,
  };
}

/** An exam begun before its slot, or by a clock of its own, says nothing about getting in. */
function entryRecord(
  { request, exam, ground }: ConsoleExam,
  state: ConsoleState,
  { entryFromS, on }: ExamCircumstances,
): readonly AchievedRecord[] {
  const firstS = firstStartS(state);
  if (entryFromS === undefined || firstS === undefined) return [];
  const { localiserS, idleBetweenS } = ground.library.policy.time;
  const seconds = firstS - entryFromS - localiserS.value - idleBetweenS.value - exam.extraSetUpS;
  if (seconds <= 0) return [];
  const group = entryGroup(request.tolerance.patientClass, request.transport);
  return [{ kind: 'entry', group, ...rounded({ seconds, censored: false }), on }];
}

function examRecord(
  { exam }: ConsoleExam,
  state: ConsoleState,
  { entryFromS, plannedS, on }: ExamCircumstances,
): readonly AchievedRecord[] {
  const { endedS } = state;
  const firstS = firstStartS(state);
  if (entryFromS === undefined || endedS === undefined || firstS === undefined) return [];
  if (firstS <= entryFromS) return [];
  return [
    {
      kind: 'exam',
      group: exam.id,
      ...rounded({ seconds: endedS - entryFromS, censored: false }),
      ...(plannedS === undefined ? {} : { statedS: plannedS }),
      on,
    },
  ];
}

const firstStartS = (state: ConsoleState) => state.tries[0]?.fromS ?? state.running?.sinceS;

const rounded = ({ seconds, censored }: Seen): Seen => ({
  seconds: Math.round(seconds * 10) / 10,
  censored,
});
