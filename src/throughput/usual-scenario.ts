import type { Department } from '../day/index.js';
import type { Sourced } from '../exams/index.js';
import { groupOf } from './kinds.js';
import type { ExamRequest } from '../planning/index.js';
import type { Scenario } from './scenario.js';

/** Numbers of a scenario that rest on published figures or on assumptions, by field. */
export type PriorField =
  | 'noShowShare'
  | 'lateShare'
  | 'lateMeanMin'
  | 'earlyMin'
  | 'cannulaShare'
  | 'cannulaMeanMin'
  | 'downShare'
  | 'downMeanMin'
  | 'emergenciesPerDay'
  | 'followUpShare'
  | 'followUpAfterDays'
  | 'overtimeUpToMin'
  | 'cutShortAfterMin';

/** Priors, each with its source; a site puts its own figures in their place. */
export const scenarioPriors: Readonly<Record<PriorField, Sourced<number>>> = {
  noShowShare: {
    value: 0.03,
    basis: 'published',
    source: 'No-shows of all imaging 3.25 % (94,096 of 2,893,626), JACR 2018; sites 2 to 35 %',
  },
  lateShare: {
    value: 0.11,
    basis: 'published',
    source: 'Not there on time 34 of 305 (11.15 %), Beker, AJR 2017',
  },
  lateMeanMin: {
    value: 12,
    basis: 'assumption',
    source: 'How late the late ones are was not found published; most by less, a few by much more',
  },
  earlyMin: {
    value: 15,
    basis: 'common practice',
    source: 'Asked to come a quarter of an hour before their time; no source',
  },
  cannulaShare: {
    value: 0.056,
    basis: 'assumption',
    source:
      'Cannula or port delays in 5.57 % of all exams (Beker, AJR 2017); taken here of exams with contrast only, so fewer in all',
  },
  cannulaMeanMin: {
    value: 22.8,
    basis: 'published',
    source: 'Mean of those delays 22.82 min, Beker, AJR 2017',
  },
  downShare: {
    value: 0.015,
    basis: 'assumption',
    source:
      'Technical events befell 1.5 % of exams (Sadigh, JACR 2017), most of them small; that a whole scanner stands still is taken as rarer, 1.5 % of its days',
  },
  downMeanMin: {
    value: 60,
    basis: 'assumption',
    source: 'How long a standstill lasts was not found published',
  },
  emergenciesPerDay: {
    value: 3,
    basis: 'assumption',
    source: 'No rate on record; put in the own one',
  },
  followUpShare: {
    value: 0.6,
    basis: 'assumption',
    source:
      'Answers owed that are not signed off by a clinician come back; the share was not found published (recall of outpatients for any reason was 0.059 %, AJR 2016;206:787, which counts another thing)',
  },
  followUpAfterDays: {
    value: 5,
    basis: 'assumption',
    source: "A working week, within the policy's due days",
  },
  overtimeUpToMin: {
    value: 60,
    basis: 'assumption',
    source: 'Nobody is started later than an hour after closing',
  },
  cutShortAfterMin: {
    value: 10,
    basis: 'assumption',
    source: 'With quick looks allowed, an exam is cut short ten minutes past its slot',
  },
};

/** What the site's own records say where they say enough. */
export interface OwnRecords {
  readonly bookings: number;
  readonly noShows: number;
}

/** Bookings on record from which on the own share of no-shows replaces the published one. */
const enoughBookings = 200;

/** A scenario's numbers with where each comes from. */
export interface SourcedScenario {
  readonly scenario: Scenario;
  readonly sources: Readonly<Record<string, string>>;
}

/**
 * The department as it is: its scanners and hours, its requests on record as mix and demand, priors elsewhere.
 *
 * @param days days over which the requests on record come in
 */
export function usualScenario(
  department: Department,
  requests: readonly ExamRequest[],
  records: OwnRecords = { bookings: 0, noShows: 0 },
): SourcedScenario {
  const days = Math.max(1, department.days.length);
  const daysWords = days === 1 ? 'one day' : `${days} days`;
  const emergencies = requests.filter((r) => groupOf(r) === 'emergency').length;
  const booked = requests.length - emergencies;
  const value = (field: PriorField) => scenarioPriors[field].value;
  const ownNoShows = records.bookings >= enoughBookings;
  const sources: Record<string, string> = Object.fromEntries(
    Object.entries(scenarioPriors).map(([field, { basis, source }]) => [
      field,
      `${basis}: ${source}`,
    ]),
  );
  sources['requestsPerDay'] =
    booked > 0
      ? `this site's own records: ${booked} requests for ${daysWords}, emergencies not counted`
      : 'assumption: no requests on record; put in the own number';
  sources['mix'] =
    requests.length > 0
      ? `this site's own records: ${requests.length} requests, each as often as it stands there`
      : 'no requests on record yet: take some before anything can be simulated';
  if (emergencies > 0)
    sources['emergenciesPerDay'] =
      `this site's own records: ${emergencies} emergencies for ${daysWords}`;
  if (ownNoShows)
    sources['noShowShare'] =
      `this site's own records: ${records.noShows} of ${records.bookings} bookings`;
  return {
    sources,
    scenario: {
      name: 'Fixed 30 minutes',
      scanners: department.scanners,
      requestsPerDay: Math.max(1, Math.round(booked / days)),
      listAtStart: Math.max(1, Math.round((booked / days) * 5)),
      slots: { kind: 'fixed', minutes: 30 },
      content: 'full protocol',
      quickLooks: false,
      bufferMin: 0,
      overbooked: 0,
      groupByCoil: false,
      emergenciesPerDay: emergencies > 0 ? emergencies / days : value('emergenciesPerDay'),
      noShowShare: ownNoShows ? records.noShows / records.bookings : value('noShowShare'),
      lateShare: value('lateShare'),
      lateMeanMin: value('lateMeanMin'),
      earlyMin: value('earlyMin'),
      technologists: department.scanners.length,
      teams: [],
      followUpShare: value('followUpShare'),
      followUpAfterDays: value('followUpAfterDays'),
      cannulaShare: value('cannulaShare'),
      cannulaMeanMin: value('cannulaMeanMin'),
      downShare: value('downShare'),
      downMeanMin: value('downMeanMin'),
      overtimeUpToMin: value('overtimeUpToMin'),
      months: 20,
      daysAMonth: 20,
      seed: 1,
    },
  };
}

/** The scenarios a manager asks about first: as it is, slots by tolerance, and those with quick looks allowed. */
export function firstScenarios(usual: Scenario): readonly Scenario[] {
  return [
    usual,
    {
      ...usual,
      name: 'Slots by tolerance',
      slots: { kind: 'tolerance', mostMin: 60 },
      content: 'planned',
    },
    {
      ...usual,
      name: 'Slots by tolerance, quick looks allowed',
      slots: { kind: 'tolerance', mostMin: 60 },
      content: 'planned',
      quickLooks: true,
      cutShortAfterMin: scenarioPriors.cutShortAfterMin.value,
    },
  ];
}
