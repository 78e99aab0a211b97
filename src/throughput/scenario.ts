import type { Scanner } from '../day/index.js';

/** Groups of patients that a mix is given in; what matters is what they can bear. */
export const patientGroups = ['settled', 'restless', 'child', 'inpatient', 'emergency'] as const;
export type PatientGroup = (typeof patientGroups)[number];

export const groupNames: Readonly<Record<PatientGroup, string>> = {
  settled: 'Outpatients who keep still',
  restless: 'Outpatients who cannot keep still or stay long',
  child: 'Children',
  inpatient: 'Patients from the wards',
  emergency: 'Emergencies',
};

/** How long a slot is. */
export type SlotRule =
  /** The same for everybody, minutes; two in a row where one answers nothing. */
  | { readonly kind: 'fixed'; readonly minutes: number }
  /** By exam, minutes; `otherwise` for exams not named. */
  | {
      readonly kind: 'by exam';
      readonly minutes: Readonly<Record<string, number>>;
      readonly otherwise: number;
    }
  /** The shortest in which this patient gets the best answers to be had in `mostMin`, with the policy's chance to finish. */
  | { readonly kind: 'tolerance'; readonly mostMin: number };

/** A team that exists `count` times and must be there throughout for these groups. */
export interface ScenarioTeam {
  readonly name: string;
  readonly count: number;
  readonly groups: readonly PatientGroup[];
}

/**
 * A department as its manager describes it, and the policy it runs. Shares are fractions 0..1, times minutes.
 * Which sequences an exam runs and how long they take comes from the site's library, not from here.
 */
export interface Scenario {
  readonly name: string;
  readonly scanners: readonly Scanner[];
  /** New requests a working day, emergencies not counted. */
  readonly requestsPerDay: number;
  /** Requests that wait when the month begins. */
  readonly listAtStart: number;
  /** Share per exam id and per patient group; scaled to 1. Absent: as in the requests on record. */
  readonly examShares?: Readonly<Record<string, number>>;
  readonly groupShares?: Readonly<Partial<Record<PatientGroup, number>>>;
  readonly slots: SlotRule;
  /** What is run in the slot: planned for the patient, or the exam's full protocol whatever the patient can bear. */
  readonly content: 'planned' | 'full protocol';
  /** Whether quick looks (below diagnostic) may be planned and may stand in at the scanner. */
  readonly quickLooks: boolean;
  /** Minutes past its slot after which an exam is cut short; absent: it is finished however long it takes. */
  readonly cutShortAfterMin?: number;
  /** Minutes kept free after each booked slot. */
  readonly bufferMin: number;
  /** Patients a scanner and day who are booked on top of full slots. */
  readonly overbooked: number;
  /** Whether the day's exams of one coil are put together. */
  readonly groupByCoil: boolean;
  readonly emergenciesPerDay: number;
  readonly noShowShare: number;
  readonly lateShare: number;
  readonly lateMeanMin: number;
  /** Those who are not late come this much before their time. */
  readonly earlyMin: number;
  /** Exams that can run at once, by staff. */
  readonly technologists: number;
  readonly teams: readonly ScenarioTeam[];
  /** Share of exams left below diagnostic that come back, and after how many working days. */
  readonly followUpShare: number;
  readonly followUpAfterDays: number;
  /** Share of contrast exams held up by the cannula, and by how long on average. */
  readonly cannulaShare: number;
  readonly cannulaMeanMin: number;
  /** Chance a scanner and day that it stands still, and how long on average. */
  readonly downShare: number;
  readonly downMeanMin: number;
  /** Nobody is started later than this after closing; who waits then is sent home and booked again. */
  readonly overtimeUpToMin: number;
  /** Months simulated, each from the same list on, and working days in each. */
  readonly months: number;
  readonly daysAMonth: number;
  /** The same seed gives the same patients to every scenario. */
  readonly seed: number;
}
