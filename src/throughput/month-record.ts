/** What is counted over one month; every figure an average or a share that a manager can read. */
export interface MonthRecord {
  /** Served a day, emergencies and follow-ups included. */
  readonly patientsPerDay: number;
  /** Questions that got their diagnostic answer, a day; each counts once, however many visits it took. */
  readonly diagnosticPerDay: number;
  /** Questions left at targeted (this question only) or screening grade (not diagnostic) or without any answer, a day. */
  readonly belowDiagnosticPerDay: number;
  /** Share of patients served who leave with quick looks only: something seen, nothing diagnostic. */
  readonly quickLookOnlyShare: number;
  /** Exams that come back because answers are owed, a day. */
  readonly followUpsPerDay: number;
  /** Minutes past closing, all scanners together, a day. */
  readonly overtimeMinPerDay: number;
  /** Share of booked exams that take longer than their slot. */
  readonly overrunShare: number;
  /** From the appointment, or a later arrival, to the start. */
  readonly waitMedianMin: number;
  readonly waitNinetiethMin: number;
  /** Open minutes in which a scanner stands empty, a scanner and day. */
  readonly idleMinPerScannerDay: number;
  /** Share of exams in which a whole sequence was run again. */
  readonly repeatShare: number;
  /** Share of exams the patient broke off. */
  readonly brokenOffShare: number;
  /** Share of exams cut short because the time was over. */
  readonly cutShortShare: number;
  /** Came and were sent home because the day was over, a day. */
  readonly sentHomePerDay: number;
  /** Asked for, and no scanner of the scenario can take it, a day. */
  readonly cannotTakePerDay: number;
  readonly noShowsPerDay: number;
  /** Days from the request to the exam, emergencies not counted. */
  readonly daysWaitedMedian: number;
  readonly listAtEnd: number;
  readonly emergencyWaitMedianMin: number;
}

export type Measure = keyof MonthRecord;

/** Counts as the month goes by; its size does not grow with the days. */
export class MonthCount {
  patients = 0;
  diagnostic = 0;
  belowDiagnostic = 0;
  quickLookOnly = 0;
  followUps = 0;
  overtimeMin = 0;
  booked = 0;
  overran = 0;
  openMin = 0;
  busyMin = 0;
  repeated = 0;
  brokenOff = 0;
  cutShort = 0;
  sentHome = 0;
  cannotTake = 0;
  noShows = 0;
  readonly waits = new WaitCounts(600);
  readonly emergencyWaits = new WaitCounts(600);
  readonly daysWaited = new DayCounts();

  record(days: number, scanners: number, listAtEnd: number): MonthRecord {
    const share = (count: number) => (this.patients === 0 ? 0 : count / this.patients);
    return {
      patientsPerDay: this.patients / days,
      diagnosticPerDay: this.diagnostic / days,
      belowDiagnosticPerDay: this.belowDiagnostic / days,
      quickLookOnlyShare: share(this.quickLookOnly),
      followUpsPerDay: this.followUps / days,
      overtimeMinPerDay: this.overtimeMin / days,
      overrunShare: this.booked === 0 ? 0 : this.overran / this.booked,
      waitMedianMin: this.waits.quantile(0.5),
      waitNinetiethMin: this.waits.quantile(0.9),
      idleMinPerScannerDay: Math.max(0, this.openMin - this.busyMin) / (days * scanners),
      repeatShare: share(this.repeated),
      brokenOffShare: share(this.brokenOff),
      cutShortShare: share(this.cutShort),
      sentHomePerDay: this.sentHome / days,
      cannotTakePerDay: this.cannotTake / days,
      noShowsPerDay: this.noShows / days,
      daysWaitedMedian: this.daysWaited.quantile(0.5),
      listAtEnd,
      emergencyWaitMedianMin: this.emergencyWaits.quantile(0.5),
    };
  }
}

const cellsPerMinute = 10;

/** Waits in tenths of a minute; those of 0 in a cell of their own, for most wait not at all. The last cell is open above. */
class WaitCounts {
  private readonly counts: Int32Array;
  private total = 0;

  constructor(longestMin: number) {
    this.counts = new Int32Array(2 + longestMin * cellsPerMinute);
  }

  add(waitMin: number): void {
    const cell = waitMin <= 0 ? 0 : 1 + Math.floor(waitMin * cellsPerMinute);
    this.counts[Math.min(cell, this.counts.length - 1)]! += 1;
    this.total += 1;
  }

  /** NaN with nothing counted: a month without such patients says nothing of them. */
  quantile(p: number): number {
    const { cell, share } = cellOf(this.counts, p, this.total);
    return cell === 0 ? 0 : (cell - 1 + share) / cellsPerMinute;
  }
}

/** Whole days. */
class DayCounts {
  private readonly counts = new Int32Array(2000);
  private total = 0;

  add(days: number): void {
    this.counts[Math.min(this.counts.length - 1, Math.max(0, days))]! += 1;
    this.total += 1;
  }

  quantile(p: number): number {
    return cellOf(this.counts, p, this.total).cell;
  }
}

/** The first cell up to which a share p of all lie, and how far into it, 0..1; NaN with nothing counted. */
function cellOf(counts: Int32Array, p: number, total: number) {
  if (total === 0) return { cell: Number.NaN, share: 0 };
  const wanted = p * total;
  let below = 0;
  for (let cell = 0; cell < counts.length; cell++) {
    const here = counts[cell]!;
    if (here > 0 && below + here >= wanted) return { cell, share: (wanted - below) / here };
    below += here;
  }
  return { cell: counts.length - 1, share: 1 };
}
