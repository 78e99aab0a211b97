import type { Scanner } from '../../day/index.js';
import { gradeWords, sequenceAt, type SiteLibrary, type SitePolicy } from '../../exams/index.js';
import { scanTime, type ScanTime, type Sequence } from '../../sequences/index.js';
import {
  cleanChance,
  movementFactor,
  profileOf,
  spanWords,
  type SpanPrior,
  type ToleranceStatement,
} from '../../tolerance/index.js';
import { chanceWords } from './day-board.js';

/** One thing that plans would say otherwise. */
export interface Effect {
  readonly what: string;
  readonly before: string;
  readonly after: string;
}

interface Piece {
  readonly exam: string;
  readonly sequence: Sequence;
  readonly time: ScanTime;
}

/**
 * What an estimate would change for a patient of its group: the chance of clean images of a short, a middling and a long
 * piece out of the library's exams, and the spans planned for.
 *
 * @param statedS a usual statement, s, where the estimate is about statements
 */
export function learningEffects(
  prior: SpanPrior,
  statedS: number,
  policies: { readonly before: SitePolicy; readonly after: SitePolicy },
  library: SiteLibrary,
  scanners: readonly Scanner[],
): readonly Effect[] {
  const { before, after } = policies;
  const patient = patientOf(prior, statedS, before);
  const [was, is] = [profileOf(patient, before), profileOf(patient, after)];
  if (prior.kind === 'stay')
    return [
      {
        what: 'Longest time in the scanner that is planned',
        before: spanWords(was.stayLimitS),
        after: spanWords(is.stayLimitS),
      },
    ];
  const span: Effect[] =
    prior.kind === 'hold' && prior.saidBy === undefined
      ? [
          {
            what: 'Longest breath-hold that is planned',
            before: spanWords(was.holdSpanS),
            after: spanWords(is.holdSpanS),
          },
        ]
      : [];
  const pieces = piecesFor(prior, was.holdSpanS, before, library, scanners);
  const clean = ({ sequence, time }: Piece, policy: SitePolicy) => {
    const profile = policy === before ? was : is;
    const elapsedS = policy.movement.assumedElapsedS.value;
    return cleanChance(sequence, time, profile, policy, elapsedS);
  };
  return [
    ...span,
    ...pieces.map((piece) => {
      const [now, then] = [clean(piece, before), clean(piece, after)];
      const grade = (policy: SitePolicy) =>
        movementFactor(policy === before ? now : then, policy, piece.sequence).grade;
      const limit =
        grade(before) === grade(after) ? '' : `; at most ${gradeWords[grade(after)]} then`;
      return {
        what: `${piece.exam}: clean images of ${piece.sequence.name}, ${pieceWords(piece.time)}`,
        before: chanceWords(now.clean),
        after: `${chanceWords(then.clean)}${limit}`,
      };
    }),
  ];
}

/** A patient of the group of whom nobody asked anything, or who said what such patients usually say. */
function patientOf(prior: SpanPrior, statedS: number, policy: SitePolicy): ToleranceStatement {
  const { kind, group, saidBy } = prior;
  const rows = policy.tolerance.stillChild.map((row) => row.underYears).sort((a, b) => a - b);
  const childUnder = rows.find((years) => group === `child under ${years}`);
  const notAsked = { kind: 'not asked' } as const;
  const unasked: ToleranceStatement = {
    ...{ still: notAsked, hold: notAsked, stay: notAsked },
    saidBy: saidBy ?? 'patient',
    followsInstructions: 'yes',
    conditions:
      group === 'breathless'
        ? ['breathless']
        : group === 'claustrophobic'
          ? ['claustrophobia']
          : [],
    patientClass: group === 'inpatient' || group === 'emergency' ? group : 'outpatient',
    ...(childUnder === undefined ? {} : { ageYears: childUnder - 1 }),
  };
  return saidBy === undefined
    ? unasked
    : { ...unasked, [kind]: { kind: 'stated', seconds: statedS } };
}

/** The longest piece of each exam's full-quality sequences; of those the shortest, the one in the middle and the longest. */
function piecesFor(
  prior: SpanPrior,
  holdSpanS: number,
  policy: SitePolicy,
  library: SiteLibrary,
  scanners: readonly Scanner[],
): readonly Piece[] {
  const wanted = prior.kind === 'hold' ? 'hold' : 'whole';
  const ability = { holdSpanS, breathsPerMinute: policy.breathing.breathsPerMinute.value };
  const longest = [...library.exams.values()].flatMap((exam) => {
    const scanner = scanners.find((s) => s.coils.includes(exam.coil));
    if (scanner === undefined) return [];
    const pieces = exam.views
      .map((view) => view.reference)
      .flatMap((id): Piece[] => {
        const sequence = sequenceAt(library, id, scanner.fieldT);
        if (sequence === undefined) return [];
        const time = scanTime(sequence, { ability, rules: policy.breathing.value });
        return time.kind === 'possible' && time.intervals.kind === wanted
          ? [{ exam: exam.name, sequence, time }]
          : [];
      });
    return pieces.sort((a, b) => lengthOf(b) - lengthOf(a)).slice(0, 1);
  });
  const sorted = longest.sort((a, b) => lengthOf(a) - lengthOf(b));
  const chosen = [0, Math.floor((sorted.length - 1) / 2), sorted.length - 1];
  return [...new Set(chosen)].flatMap((n) => sorted[n] ?? []);
}

const lengthOf = ({ time }: Piece) => time.intervals.lengthS;

function pieceWords({ intervals: { kind, count, lengthS } }: ScanTime): string {
  const length = `${Math.round(lengthS)} s`;
  if (kind !== 'hold') return `still for ${length}`;
  return count === 1 ? `one breath-hold of ${length}` : `${count} breath-holds of ${length}`;
}
