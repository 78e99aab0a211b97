import type { SitePolicy } from '../exams/index.js';
import { holdGroup, stayGroup, stillGroup, type SpanKind } from './groups.js';
import type { ToleranceStatement } from './statement.js';
import { longestWith, weibullThrough, weibullWithMean, type Survival } from './survival.js';

/** What planning uses of a patient: three curves, the spans planned for, and where each comes from. */
export interface ToleranceProfile {
  readonly movement: Survival;
  readonly hold: Survival;
  readonly stay: Survival;
  /** Longest breath-hold planned, s; 0: none. */
  readonly holdSpanS: number;
  /** Longest time in the scanner planned, s. */
  readonly stayLimitS: number;
  /** One sentence a span: what was said, or which prior stands in and its source. */
  readonly says: { readonly still: string; readonly hold: string; readonly stay: string };
  /** Whether any span rests on a prior because nobody asked. */
  readonly restsOnPrior: boolean;
}

/**
 * Turns a statement into survival curves: a stated span is reached with the policy's chance for
 * whoever said it; where nothing was stated, the group's prior stands in and is named.
 */
export function profileOf(statement: ToleranceStatement, policy: SitePolicy): ToleranceProfile {
  const still = stillCurve(statement, policy);
  const hold = holdCurve(statement, policy);
  const stay = stayCurve(statement, policy);
  return {
    movement: still.curve,
    hold: hold.curve,
    stay: stay.curve,
    holdSpanS: hold.spanS,
    stayLimitS: longestWith(stay.curve, policy.time.stayConfidence.value),
    says: { still: still.says, hold: hold.says, stay: stay.says },
    restsOnPrior:
      statement.still.kind === 'not asked' ||
      statement.stay.kind === 'not asked' ||
      hold.restsOnPrior,
  };
}

interface Curve {
  readonly curve: Survival;
  readonly says: string;
}

function stillCurve(statement: ToleranceStatement, policy: SitePolicy): Curve {
  const shape = policy.movement.shape.value;
  if (statement.still.kind === 'stated') {
    const { seconds } = statement.still;
    return stated('still', seconds, statement, policy, shape, `still for ${minutes(seconds)}`);
  }
  const { prior, words } = stillGroup(statement, policy);
  return {
    curve: weibullThrough(prior.value.chance, prior.value.atS, shape),
    says: `stillness not asked yet: planned as for ${words}, ${percent(prior.value.chance)} keep still for ${minutes(prior.value.atS)} (${prior.source})`,
  };
}

function holdCurve(
  statement: ToleranceStatement,
  policy: SitePolicy,
): Curve & { readonly spanS: number; readonly restsOnPrior: boolean } {
  const never = (says: string) => ({ curve: () => 0, spanS: 0, says, restsOnPrior: false });
  if (statement.followsInstructions === 'no')
    return never('does not follow instructions: no breath-hold is planned');
  const shape = policy.breathing.shape.value;
  if (statement.hold.kind === 'stated') {
    const { seconds } = statement.hold;
    if (seconds <= 0) return never('cannot hold the breath: none is planned');
    const curve = stated(
      'hold',
      seconds,
      statement,
      policy,
      shape,
      `holds the breath ${seconds} s`,
    );
    return { ...curve, spanS: seconds, restsOnPrior: false };
  }
  const tooYoung =
    (statement.ageYears !== undefined &&
      statement.ageYears < policy.tolerance.holdFromYears.value) ||
    statement.conditions.includes('small child');
  if (tooYoung) return never('too young to be counted on for breath-holds: none is planned');
  if (statement.followsInstructions === 'not asked' && statement.conditions.includes('confused')) {
    return never(
      'confused, and nobody asked whether instructions are followed: no breath-hold is planned',
    );
  }
  const { prior, words } = holdGroup(statement, policy);
  const curve = weibullWithMean(prior.value.meanS, shape);
  const spanS = longestWith(curve, policy.tolerance.plannedReached.value, 300);
  return {
    curve,
    spanS,
    restsOnPrior: true,
    says: `breath-hold not asked yet: planned for ${spanS.toFixed(0)} s, which ${percent(policy.tolerance.plannedReached.value)} of ${words} reach (${prior.source})`,
  };
}

function stayCurve(statement: ToleranceStatement, policy: SitePolicy): Curve {
  if (statement.stay.kind === 'stated') {
    const { seconds } = statement.stay;
    return stated(
      'stay',
      seconds,
      statement,
      policy,
      1,
      `bears the scanner for ${minutes(seconds)}`,
    );
  }
  const { prior, words } = stayGroup(statement, policy);
  return {
    curve: weibullThrough(prior.value.chance, prior.value.atS),
    says: `time in the scanner not asked yet: planned as for ${words}, ${percent(prior.value.chance)} bear ${minutes(prior.value.atS)} (${prior.source})`,
  };
}

function stated(
  kind: SpanKind,
  seconds: number,
  statement: ToleranceStatement,
  policy: SitePolicy,
  shape: number,
  words: string,
): Curve {
  const { statedReached, statedReachedLearned } = policy.tolerance;
  const learned = statedReachedLearned?.[kind]?.[statement.saidBy];
  const reached = (learned ?? statedReached[statement.saidBy]).value;
  return {
    curve: weibullThrough(reached, Math.max(seconds, 0.1), shape),
    says: `${words}, said by ${statement.saidBy === 'earlier exam' ? 'an earlier exam' : `the ${statement.saidBy}`}; ${percent(reached)} of such statements are counted on${learned === undefined ? '' : ` (${learned.source})`}`,
  };
}

const percent = (p: number) => `${Number((p * 100).toPrecision(3))} %`;
const minutes = (s: number) =>
  s < 90 ? `${Number(s.toPrecision(3))} s` : `${Number((s / 60).toPrecision(3))} min`;
