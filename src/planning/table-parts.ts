import type { Exam, SitePolicy } from '../exams/index.js';
import { atSeconds, convolve, lognormal, type Distribution } from './distribution.js';
import type { Candidate } from './cast.js';
import { sequenceTime } from './table-time.js';
import type { ExamRequest } from './request.js';

/** Time spent whatever is chosen: entry and positioning, localiser, exit. */
export interface FixedTime {
  readonly table: Distribution;
  readonly localiserS: number;
  readonly entryMeanS: number;
  readonly exitMeanS: number;
}

/** Entry grows with the patient's class, transport and the exam's positioning. */
export function fixedTime(
  request: Pick<ExamRequest, 'transport' | 'tolerance'>,
  exam: Exam,
  policy: SitePolicy,
): FixedTime {
  const { time } = policy;
  const entryMeanS =
    time.entry.value.meanS +
    time.classExtraS[request.tolerance.patientClass].value +
    time.transportExtraS[request.transport].value +
    exam.extraSetUpS;
  const entry = lognormal(entryMeanS, time.entry.value.cv);
  const exit = lognormal(time.exit.value.meanS, time.exit.value.cv);
  const localiserS = time.localiserS.value + time.idleBetweenS.value;
  return {
    table: convolve(convolve(entry, atSeconds(localiserS)), exit),
    localiserS,
    entryMeanS,
    exitMeanS: time.exit.value.meanS,
  };
}

/** Time left to spend whatever is chosen when the patient is on the table already: getting out. */
export function exitTime(policy: SitePolicy): FixedTime {
  const { meanS, cv } = policy.time.exit.value;
  return { table: lognormal(meanS, cv), localiserS: 0, entryMeanS: 0, exitMeanS: meanS };
}

/** Nominal scanner time of a candidate without repeats, whole seconds, the pause after it included. */
export function nominalS(candidate: Candidate, policy: SitePolicy): number {
  return Math.ceil(candidate.time.acquisitionS + policy.time.idleBetweenS.value - 1e-9);
}

/** Table time of a candidate with the repeats this patient is likely to need. */
export function candidateTime(candidate: Candidate, policy: SitePolicy): Distribution {
  const { time, clean, sequence } = candidate;
  const pause = time.intervals.kind === 'hold' ? policy.breathing.value.recoveryGapS : 0;
  return sequenceTime({
    acquisitionS: time.acquisitionS,
    idleS: policy.time.idleBetweenS.value,
    repeatChance: clean.retakes === 'whole' ? 1 - clean.clean : 0,
    ...(clean.retakes === 'pieces'
      ? {
          retake: {
            intervals: time.intervals.count,
            intervalS: time.intervals.lengthS + pause,
            spoilChance: clean.spoiledPiece,
          },
        }
      : {}),
    ...(sequence.breathing === 'triggered' ? { variation: policy.time.triggeredCv.value } : {}),
  });
}
