import { rankOf, type SitePolicy } from '../exams/index.js';
import type { ToleranceProfile } from '../tolerance/index.js';
import type { Cast } from './cast.js';
import { atSeconds, coarsened, convolve, lognormal } from './distribution.js';
import type { ChoiceProblem, SharedTime } from './solver/problem.js';
import { pointsApartS } from './table-time.js';
import { candidateTime, nominalS, type FixedTime } from './table-parts.js';

/**
 * The choice a solver is given: views with timed and graded candidates, questions with the views they
 * need, the fixed time, the slot. Candidate indices are the cast's.
 */
export function choiceProblem(input: {
  readonly cast: Cast;
  readonly fixed: FixedTime;
  readonly profile: ToleranceProfile;
  readonly policy: SitePolicy;
  readonly slotS: number;
}): ChoiceProblem {
  const { cast, fixed, profile, policy, slotS } = input;
  const indexOfView = new Map(cast.views.map(({ view }, index) => [view.id, index]));
  const views = cast.views.map(({ view, candidates }) => {
    const twin = view.requires === undefined ? undefined : indexOfView.get(view.requires);
    return {
      id: view.id,
      candidates: candidates.map((candidate) => ({
        id: `${candidate.sequence.id}/${candidate.time.intervals.count}`,
        ranks: cast.questions.map((q) => {
          const answer = candidate.answers.get(q.id);
          return answer === undefined ? 0 : rankOf(answer.grade);
        }),
        quality: candidate.quality,
        nominalS: nominalS(candidate, policy),
        time: candidateTime(candidate, policy),
      })),
      ...(twin === undefined ? {} : { requiresView: twin }),
    };
  });
  return {
    questions: cast.questions.map((q) => ({
      id: q.id,
      weight: q.weight,
      needs: q.needs.map((need) => indexOfView.get(need.view) ?? -1),
    })),
    views,
    base: fixed.table,
    baseNominalS: Math.ceil(fixed.localiserS),
    shared: injectionTime(cast, policy),
    slotS,
    confidence: policy.time.finishConfidence.value,
    stayLimitS: Math.floor(profile.stayLimitS),
  };
}

/**
 * The injection, spent once when any after-contrast view is run. A wait that the first timed phase asks
 * for is counted in full, although the running order may fill it with other sequences: the promise to
 * the slot stays on the safe side.
 */
function injectionTime(cast: Cast, policy: SitePolicy): SharedTime[] {
  const after = cast.views.flatMap(({ view }, index) => (view.contrast === 'after' ? [index] : []));
  if (after.length === 0) return [];
  const waits = after.flatMap((index) =>
    (cast.views[index]?.candidates ?? []).map((c) => c.sequence.earliestAfterInjectionS ?? 0),
  );
  const waitS = Math.max(0, ...waits);
  const { meanS, cv } = policy.time.injection.value;
  return [
    {
      views: after,
      nominalS: Math.ceil(meanS + waitS),
      time: coarsened(convolve(lognormal(meanS, cv), atSeconds(waitS)), pointsApartS(meanS * cv)),
    },
  ];
}
