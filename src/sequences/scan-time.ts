import { shotsOf, trainDurationMs } from './encoding.js';
import { holdLengths } from './holds.js';
import type { ImpossibleScan, ScanTime, ScanTimeOptions, WorkingLine } from './scan-time-types.js';
import { encodingLines, impossible, round, shotsHow, tooLongToHold } from './scan-time-words.js';
import type { Sequence } from './sequence.js';
import { singleShotTime } from './single-shot-time.js';
import { imagesPerSlice, slicesThatFit } from './slices-per-repeat.js';

/**
 * Acquisition time and the intervals in it that must be kept still or held.
 *
 * Time = repetition time x shots x averages x passes + start-up repeats, with shots =
 * ceil(lines / echo train length) and passes = ceil(slices / slices that fit one repeat); single-shot:
 * slices x the longest of the train, the slice interval and the cooling interval (standard sequence
 * arithmetic; checked against published protocol tables). Excludes prescan.
 */
export function scanTime(sequence: Sequence, options: ScanTimeOptions): ScanTime | ImpossibleScan {
  const working = encodingLines(sequence);
  const slotMs = trainDurationMs(sequence) + sequence.overheadMs;
  if (sequence.family === 'single-shot') return singleShotTime(sequence, options, slotMs, working);

  const breathMs = 60_000 / options.ability.breathsPerMinute;
  const triggered = sequence.breathing === 'triggered';
  const repetitionTimeMs = triggered
    ? Math.ceil(sequence.repetitionTimeMs / breathMs - 1e-9) * breathMs
    : sequence.repetitionTimeMs;
  if (triggered) {
    working.push({
      what: 'repeat',
      how: `whole breaths at ${options.ability.breathsPerMinute} per minute`,
      value: `${round(repetitionTimeMs)} ms`,
    });
  }
  const roomMs = triggered
    ? Math.min(repetitionTimeMs, options.rules.acceptanceFraction * breathMs)
    : repetitionTimeMs;
  const slicesPerRepeat = sequence.dimensions === 3 ? 1 : slicesThatFit(sequence, slotMs, roomMs);
  if (slicesPerRepeat < 1) {
    return impossible(
      sequence,
      `one slice needs ${round(slotMs + (sequence.inversionTimeMs ?? 0))} ms`,
      `only ${round(roomMs)} ms fit into one repeat`,
      'Lengthen Repetition Time, or shorten the echo train or the echo spacing.',
    );
  }
  const passes = sequence.dimensions === 3 ? 1 : Math.ceil(sequence.slices / slicesPerRepeat);
  const shots = shotsOf(sequence);
  const images = imagesPerSlice(sequence);
  const repeatS = repetitionTimeMs / 1000;
  const repeats = shots * images * passes;
  working.push(
    { what: 'shots', how: shotsHow(sequence), value: `${shots}` },
    {
      what: 'slices per repeat',
      how: `${round(roomMs)} ms / ${round(slotMs)} ms per slice`,
      value: sequence.dimensions === 3 ? 'one slab' : `${slicesPerRepeat}`,
    },
    { what: 'passes', how: `${sequence.slices} slices`, value: `${passes}` },
  );
  const common = { slicesPerRepeat, passes, shots, repetitionTimeMs };
  const startUpS = sequence.startUpRepeats * repeatS;
  const phaseS = repeats * repeatS + startUpS * passes;
  const total = (acquisitionS: number, how: string): WorkingLine[] => [
    ...working,
    { what: 'acquisition', how, value: `${round(acquisitionS)} s` },
  ];

  if (sequence.phases > 1) {
    if (sequence.breathing === 'held' && options.ability.holdSpanS < phaseS) {
      return tooLongToHold(sequence, phaseS, options.ability.holdSpanS);
    }
    const stepS = Math.max(sequence.phaseIntervalS, phaseS);
    const acquisitionS = stepS * (sequence.phases - 1) + phaseS;
    return {
      kind: 'possible',
      acquisitionS,
      intervals: { kind: 'phase', count: sequence.phases, lengthS: phaseS },
      ...common,
      working: total(acquisitionS, `${sequence.phases} phases of ${round(phaseS)} s`),
    };
  }
  if (sequence.breathing === 'held') {
    const split = holdLengths({
      units: repeats,
      unitS: repeatS,
      startUpS,
      wholeOnly: sequence.dimensions === 3,
      holdSpanS: options.ability.holdSpanS,
      recoveryGapS: options.rules.recoveryGapS,
      mostHolds: options.rules.mostHolds,
      ...(options.holds === undefined ? {} : { holds: options.holds }),
    });
    if (split === undefined) {
      const leastS = sequence.dimensions === 3 ? phaseS : repeatS + startUpS;
      return tooLongToHold(sequence, leastS, options.ability.holdSpanS);
    }
    return {
      kind: 'possible',
      acquisitionS: split.totalS,
      intervals: { kind: 'hold', count: split.holds, lengthS: split.longestS },
      ...common,
      working: total(
        split.totalS,
        `${split.holds} breath-hold(s) of up to ${round(split.longestS)} s`,
      ),
    };
  }
  const epi = sequence.family === 'diffusion-epi';
  return {
    kind: 'possible',
    acquisitionS: phaseS,
    intervals: epi
      ? { kind: 'repeat', count: repeats, lengthS: repeatS }
      : { kind: 'whole', count: 1, lengthS: phaseS },
    ...common,
    working: total(
      phaseS,
      `${round(repeatS)} s x ${shots} x ${images} average(s) or image(s) x ${passes} pass(es)` +
        (startUpS > 0 ? ` + start-up ${round(startUpS * passes)} s` : ''),
    ),
  };
}
