import { randomStream, type RandomStream } from '../shared/index.js';
import { drawsPerExam } from './exam-run.js';
import type { SimKind } from './sim-department.js';

/** Somebody asked for: what will happen is drawn when the request comes, so every policy meets the same patient. */
export interface Patient {
  readonly kind: number;
  /** Day of the request; below 0 before the month. */
  readonly askedDay: number;
  /** Visits that count as follow-ups of the first. */
  readonly followUp: number;
  /** Times booked and not come. */
  readonly missed: number;
  /** Bit per question that has its diagnostic answer. */
  answered: number;
  /** Uniform numbers: attendance first, then the exam. */
  readonly draws: Float64Array;
}

/** Where each use of chance stands in `draws`. */
export const drawAt = {
  noShow: 0,
  late: 1,
  lateBy: 2,
  cannula: 3,
  cannulaMin: 4,
  coil: 5,
  comesBack: 6,
  exam: 7,
} as const;

/** Patients one after the other, each use of chance from a stream of its own with a fixed number of draws a patient. */
export class PatientSource {
  private readonly who: RandomStream;
  private readonly attendance: RandomStream;
  private readonly delays: RandomStream;
  private readonly table: RandomStream;
  private readonly patience: RandomStream;
  private readonly movement: RandomStream;
  private readonly comesBack: RandomStream;
  private readonly cumulative: Float64Array;
  private readonly numbers: Int32Array;

  /** @param name whose patients: 'booked', 'emergency', 'follow-up' */
  constructor(seed: number, month: number, name: string, kinds: readonly SimKind[]) {
    const stream = (use: string) => randomStream(seed, `month ${month}/${name}/${use}`);
    this.who = stream('who');
    this.attendance = stream('attendance');
    this.delays = stream('delays');
    this.table = stream('table');
    this.patience = stream('patience');
    this.movement = stream('movement');
    this.comesBack = stream('comes back');
    const chosen = kinds
      .map((kind, n) => ({ kind, n }))
      .filter(({ kind }) => kind.emergency === (name === 'emergency'));
    this.numbers = Int32Array.from(chosen, ({ n }) => n);
    let sum = 0;
    this.cumulative = Float64Array.from(chosen, ({ kind }) => (sum += kind.weight));
  }

  /** Whether there is any kind to draw. */
  get any(): boolean {
    return this.numbers.length > 0;
  }

  next(askedDay: number): Patient {
    return this.patient(this.drawKind(this.who()), askedDay);
  }

  /** The same patient once more, with luck of another day; what is not given stays as it was. */
  again(
    before: Patient,
    change: Partial<Pick<Patient, 'askedDay' | 'followUp' | 'missed'>> = {},
  ): Patient {
    const { kind, askedDay, followUp, missed, answered } = { ...before, ...change };
    return { ...this.patient(kind, askedDay), followUp, missed, answered };
  }

  private patient(kind: number, askedDay: number): Patient {
    const draws = new Float64Array(drawAt.exam + drawsPerExam);
    for (let i = 0; i < 3; i++) draws[i] = this.attendance();
    for (let i = 3; i < 6; i++) draws[i] = this.delays();
    draws[drawAt.comesBack] = this.comesBack();
    draws[drawAt.exam] = this.table();
    draws[drawAt.exam + 1] = this.table();
    draws[drawAt.exam + 2] = this.patience();
    for (let i = drawAt.exam + 3; i < draws.length; i++) draws[i] = this.movement();
    return { kind, askedDay, followUp: 0, missed: 0, answered: 0, draws };
  }

  private drawKind(u: number): number {
    const { cumulative, numbers } = this;
    const wanted = u * (cumulative[cumulative.length - 1] ?? 0);
    let low = 0;
    let high = cumulative.length - 1;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (cumulative[middle]! > wanted) high = middle;
      else low = middle + 1;
    }
    return numbers[low] ?? 0;
  }
}
