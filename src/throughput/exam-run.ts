import { binomial, lognormalFactor, normalQuantile } from './variates.js';

/** One acquisition as it is simulated, seconds; or the injection. */
export interface RunStep {
  /** Number of the view it serves; -1 for the injection. */
  readonly view: number;
  readonly acquisitionS: number;
  /** Pause after it. */
  readonly idleS: number;
  /** Coefficient of variation of the acquisition (triggered) or of the injection. */
  readonly variation: number;
  /** What is taken again when movement or breath spoils it. */
  readonly retakes: 'pieces' | 'whole' | 'nothing';
  readonly pieces: number;
  /** One piece taken again, recovery included, s. */
  readonly pieceS: number;
  /** Chance that a piece is spoiled at its first try. */
  readonly spoiledPiece: number;
  /** Chance that all of it comes out clean, pieces taken again counted in. */
  readonly clean: number;
  /** Per question: rank of clean images for it (0..3), -1 where the question does not need this view. */
  readonly ranks: readonly number[];
}

/** A view's step and, where the site allows a fallback, the quick one that may take its place. */
export interface RunView {
  readonly step: RunStep;
  readonly quick?: RunStep;
}

/** An exam as it is simulated on one kind of scanner. Plain data, so that it can be handed to a thread. */
export interface RunPlan {
  readonly entryMeanS: number;
  readonly entryCv: number;
  readonly localiserS: number;
  readonly exitMeanS: number;
  readonly exitCv: number;
  readonly order: readonly RunView[];
  /** Per question: numbers of the views it needs. */
  readonly needs: readonly (readonly number[])[];
  /** Chance that the patient is still in the scanner after n * `stayStepS` seconds. */
  readonly stay: Float64Array;
}

export const stayStepS = 15;
/** Most steps of an exam that draws are kept for. */
export const mostSteps = 14;
/** Uniform numbers one exam uses: entry, exit, giving up, then five a step. */
export const drawsPerExam = 3 + 5 * mostSteps;

/** What became of an exam. Reused from exam to exam; read it before the next. */
export interface ExamRun {
  /** From the patient's entry to the free table, s. */
  tableS: number;
  /** Rank reached per question. */
  readonly ranks: number[];
  repeats: number;
  /** The patient gave up before the end. */
  gaveUp: boolean;
  /** Something was left out or taken quickly because the time was over. */
  cutShort: boolean;
}

export const emptyRun = (): ExamRun => ({
  tableS: 0,
  ranks: [],
  repeats: 0,
  gaveUp: false,
  cutShort: false,
});

const viewRanks: (readonly number[] | undefined)[] = new Array<undefined>(32).fill(undefined);

/**
 * Runs one exam: entry, localiser, sequences in the planned order with what movement and breath spoil taken again as in the
 * plan's own table time, the quick version where the full one failed or would run past the limit, until the patient
 * gives up or the list is done.
 *
 * @param draws `drawsPerExam` uniform numbers in [0, 1) from `offset` on: the patient's luck, the same under every policy
 * @param limitS seconds after entry at which the exam is cut short; Infinity: never
 */
export function runExam(
  plan: RunPlan,
  draws: Float64Array,
  offset: number,
  limitS: number,
  run: ExamRun,
): void {
  run.repeats = 0;
  run.gaveUp = false;
  run.cutShort = false;
  const luck = draws[offset + 2]!;
  const exitS = plan.exitMeanS * lognormalFactor(normal(draws[offset + 1]!), plan.exitCv);
  let clock =
    plan.entryMeanS * lognormalFactor(normal(draws[offset]!), plan.entryCv) + plan.localiserS;
  const views = plan.order.length;
  for (let v = 0; v < views; v++) viewRanks[v] = undefined;
  for (let i = 0; i < views; i++) {
    const { step, quick } = plan.order[i]!;
    const at = offset + 3 + 5 * i;
    const fits = clock + step.acquisitionS + plan.exitMeanS <= limitS;
    let clean = false;
    if (fits) {
      clock += acquire(step, draws[at]!, draws[at + 1]!, draws[at + 2]!, run);
      clean = acquired;
      if (stayed(plan.stay, clock) < luck) {
        run.gaveUp = true;
        break;
      }
    } else run.cutShort = true;
    if (clean) {
      if (step.view >= 0) viewRanks[step.view] = step.ranks;
      continue;
    }
    if (quick === undefined || clock + quick.acquisitionS + plan.exitMeanS > limitS) continue;
    clock += acquire(quick, draws[at + 3]!, draws[at + 4]!, 0.5, run);
    if (stayed(plan.stay, clock) < luck) {
      run.gaveUp = true;
      break;
    }
    if (acquired) viewRanks[quick.view] = quick.ranks;
  }
  if (run.gaveUp) clock = Math.min(clock, gaveUpAtS(plan.stay, luck));
  run.tableS = clock + exitS;
  run.ranks.length = plan.needs.length;
  for (let q = 0; q < plan.needs.length; q++) {
    let rank = 3;
    for (const view of plan.needs[q]!) rank = Math.min(rank, viewRanks[view]?.[q] ?? 0);
    run.ranks[q] = rank;
  }
}

let acquired = false;

/** Seconds an acquisition takes with what is taken again; whether it came out clean is left in `acquired`. */
function acquire(step: RunStep, u: number, again: number, pace: number, run: ExamRun): number {
  const { acquisitionS, idleS, variation, retakes, pieces, pieceS, spoiledPiece, clean } = step;
  const onceS =
    variation === 0 ? acquisitionS : acquisitionS * lognormalFactor(normal(pace), variation);
  if (step.view < 0) {
    acquired = true;
    return onceS;
  }
  if (retakes === 'pieces') {
    const spoiled = binomial(u, pieces, spoiledPiece);
    acquired = spoiled === 0 || again < (1 - spoiledPiece) ** spoiled;
    return onceS + spoiled * pieceS + idleS;
  }
  if (u < clean) {
    acquired = true;
    return onceS + idleS;
  }
  if (retakes === 'nothing') {
    acquired = false;
    return onceS + idleS;
  }
  run.repeats += 1;
  acquired = again < clean;
  return 2 * (onceS + idleS);
}

/** Standard normal from a uniform number that may be 0. */
const normal = (u: number) => normalQuantile(u < 1e-16 ? 1e-16 : u);

function stayed(stay: Float64Array, clockS: number): number {
  const at = clockS / stayStepS;
  const below = Math.floor(at);
  if (below >= stay.length - 1) return stay[stay.length - 1]!;
  return stay[below]! + (at - below) * (stay[below + 1]! - stay[below]!);
}

/** When a patient with this luck gives up: the curve read backwards. */
function gaveUpAtS(stay: Float64Array, luck: number): number {
  let low = 0;
  let high = stay.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (stay[middle]! >= luck) low = middle;
    else high = middle;
  }
  const drop = stay[low]! - stay[high]!;
  return stayStepS * (low + (drop > 0 ? (stay[low]! - luck) / drop : 0));
}
