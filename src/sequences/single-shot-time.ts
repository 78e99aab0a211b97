import { shotsOf, trainDurationMs } from './encoding.js';
import { holdLengths } from './holds.js';
import type { ImpossibleScan, ScanTime, ScanTimeOptions, WorkingLine } from './scan-time-types.js';
import { round, tooLongToHold } from './scan-time-words.js';
import type { Sequence } from './sequence.js';

/**
 * Single-shot: slices x the longest of the train, the slice interval and the cooling interval; each
 * slice is an interval of its own. Triggered: one slice per whole breaths. Held: whole slices per hold.
 */
export function singleShotTime(
  sequence: Sequence,
  options: ScanTimeOptions,
  slotMs: number,
  working: WorkingLine[],
): ScanTime | ImpossibleScan {
  const intervalMs = Math.max(
    slotMs + (sequence.inversionTimeMs ?? 0),
    sequence.repetitionTimeMs,
    sequence.coolingGapMs,
  );
  const breathMs = 60_000 / options.ability.breathsPerMinute;
  const stepMs =
    sequence.breathing === 'triggered' ? Math.ceil(intervalMs / breathMs) * breathMs : intervalMs;
  const units =
    shotsOf(sequence) * (sequence.dimensions === 3 ? 1 : sequence.slices) * sequence.averages;
  working.push({
    what: 'per slice',
    how:
      `longest of train ${round(slotMs)} ms, slice interval ${round(sequence.repetitionTimeMs)} ms, ` +
      `cooling interval ${round(sequence.coolingGapMs)} ms` +
      (sequence.breathing === 'triggered' ? ', then whole breaths' : ''),
    value: `${round(stepMs)} ms`,
  });
  const common = { slicesPerRepeat: 1, passes: units, shots: 1, repetitionTimeMs: stepMs };
  if (sequence.breathing === 'held') {
    const split = holdLengths({
      units,
      unitS: stepMs / 1000,
      startUpS: 0,
      wholeOnly: false,
      holdSpanS: options.ability.holdSpanS,
      recoveryGapS: options.rules.recoveryGapS,
      mostHolds: options.rules.mostHolds,
      ...(options.holds === undefined ? {} : { holds: options.holds }),
    });
    if (split === undefined) {
      return tooLongToHold(sequence, stepMs / 1000, options.ability.holdSpanS);
    }
    working.push({
      what: 'acquisition',
      how: `${split.holds} breath-hold(s) of up to ${round(split.longestS)} s`,
      value: `${round(split.totalS)} s`,
    });
    return {
      kind: 'possible',
      acquisitionS: split.totalS,
      intervals: { kind: 'hold', count: split.holds, lengthS: split.longestS },
      ...common,
      working,
    };
  }
  const acquisitionS = (units * stepMs) / 1000;
  working.push({
    what: 'acquisition',
    how: `${units} slice(s) x ${round(stepMs)} ms`,
    value: `${round(acquisitionS)} s`,
  });
  return {
    kind: 'possible',
    acquisitionS,
    intervals: { kind: 'slice', count: units, lengthS: trainDurationMs(sequence) / 1000 },
    ...common,
    working,
  };
}
