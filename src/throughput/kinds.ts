import type { ExamRequest } from '../planning/index.js';
import type { PatientGroup } from './scenario.js';
import { standIns, type CountedKind } from './stand-ins.js';

/** A kind of request: an exam with what one sort of patient can bear, and how often it comes. */
export interface RequestKind {
  readonly request: ExamRequest;
  readonly group: PatientGroup;
  /** Share among requests that are booked, or among emergencies for that group. */
  readonly weight: number;
}

/** Below this many minutes still or in the scanner an outpatient counts as one who cannot keep still or stay. Ours, an assumption. */
const restlessStillS = 5 * 60;
const restlessStayS = 20 * 60;

/** The group a request belongs to: by what it says about age, class, stillness and bearing the scanner. */
export function groupOf({ tolerance, priority }: ExamRequest): PatientGroup {
  const { ageYears, conditions, patientClass, still, stay } = tolerance;
  if (patientClass === 'emergency' || priority === 'stat') return 'emergency';
  if (patientClass === 'inpatient') return 'inpatient';
  if (conditions.includes('small child') || (ageYears !== undefined && ageYears < 16))
    return 'child';
  const short =
    (still.kind === 'stated' && still.seconds < restlessStillS) ||
    (stay.kind === 'stated' && stay.seconds < restlessStayS);
  return short || conditions.some((c) => c !== 'breathless') ? 'restless' : 'settled';
}

export interface MixWanted {
  readonly examShares?: Readonly<Record<string, number>>;
  readonly groupShares?: Readonly<Partial<Record<PatientGroup, number>>>;
}

/** Kinds that were planned, of those on record; fewer where some stand for all, or where a share of 0 is wanted. */
export interface KindsUsed {
  readonly planned: number;
  readonly onRecord: number;
}

/** Most kinds planned for; with more, some stand for all. */
export const mostKinds = 300;

/** From this age on patients of the same class and conditions plan alike: site policies end childhood before. */
const grownYears = 21;

/**
 * The kinds of request a department sees: its own requests on record, each as often as it stands there, weighed so that
 * exams and groups come in the wanted shares (iterative proportional fitting, Deming and Stephan 1940). What never stood
 * on record together is not invented. Emergencies keep their own mix.
 */
export function kindsOf(
  requests: readonly ExamRequest[],
  wanted: MixWanted = {},
): readonly RequestKind[] {
  const all = standIns(countedKinds(requests), mostKinds);
  const booked = all.filter((k) => k.group !== 'emergency');
  const emergencies = all.filter((k) => k.group === 'emergency');
  rake(booked, wanted);
  rake(emergencies, {});
  return [...booked, ...emergencies].filter((k) => k.weight > 0);
}

/** Requests that are simulated alike, counted once. */
export function countedKinds(requests: readonly ExamRequest[]): readonly CountedKind[] {
  const counted = new Map<string, CountedKind>();
  for (const request of requests) {
    const key = keyOf(request);
    const known = counted.get(key);
    if (known === undefined) counted.set(key, { request, group: groupOf(request), weight: 1 });
    else known.weight += 1;
  }
  return [...counted.values()];
}

/** What a visit depends on: not the number, the day, the note, or who comes along. */
function keyOf(request: ExamRequest): string {
  const { examId, questionIds, priority, tolerance, contrast, transport } = request;
  const { ageYears, ...bearing } = tolerance;
  const young = ageYears !== undefined && ageYears < grownYears ? ageYears : null;
  const urgency = priority === 'routine' || priority === 'stat' ? priority : 'urgent';
  return JSON.stringify([
    ...[examId, questionIds, urgency, bearing, young, contrast, transport],
    request.b1RmsLimitMicroTesla ?? null,
  ]);
}

const rounds = 60;

function rake(kinds: CountedKind[], { examShares, groupShares }: MixWanted): void {
  const fit = (
    share: (k: CountedKind) => number | undefined,
    label: (k: CountedKind) => string,
  ) => {
    const sums = new Map<string, number>();
    for (const k of kinds) sums.set(label(k), (sums.get(label(k)) ?? 0) + k.weight);
    for (const k of kinds) {
      const sum = sums.get(label(k)) ?? 0;
      if (sum > 0) k.weight *= (share(k) ?? 0) / sum;
    }
  };
  if (examShares !== undefined || groupShares !== undefined) {
    for (let round = 0; round < rounds; round++) {
      if (examShares !== undefined)
        fit(
          (k) => examShares[k.request.examId],
          (k) => k.request.examId,
        );
      if (groupShares !== undefined)
        fit(
          (k) => groupShares[k.group],
          (k) => k.group,
        );
    }
  }
  const total = kinds.reduce((sum, k) => sum + k.weight, 0);
  if (total > 0) for (const k of kinds) k.weight /= total;
}
