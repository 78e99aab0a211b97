import { clock } from './conflicts.js';
import { earliestFree, freeBeside, partWords, startIn } from './fill-free.js';
import {
  dateRefusal,
  priorityWorth,
  type FillProblem,
  type WaitingRequest,
} from './fill-problem.js';
import type { Offer } from './offers.js';
import { scannerName } from './mend-words.js';
import type { Booking } from './scanners.js';

type Placed = Booking & { readonly offer: Offer };

/** What would make room for a request that found none. */
export interface WayIn {
  readonly kind:
    'longer hours' | 'other time' | 'other day' | 'shorter slot' | 'instead of' | 'scanner';
  readonly sentence: string;
}

export interface NotPlaced {
  readonly requestId: string;
  readonly why: string;
  /** Empty only when nothing this tool knows of would help. */
  readonly ways: readonly WayIn[];
}

const at = (problem: FillProblem, b: Pick<Booking, 'scannerId' | 'date' | 'startMin'>) =>
  `${scannerName(b.scannerId, problem.department)}, ${b.date} ${clock(b.startMin)}`;

/** Never rounded up to certainty. */
const chanceWords = (p: number) => (p > 0.995 ? '>99 %' : `${Math.round(100 * p)} %`);

/** Why a placement stands where it stands. */
export function whyHere(
  problem: FillProblem,
  placed: readonly Placed[],
  own: Placed,
): readonly string[] {
  const request = problem.waiting.find((r) => r.id === own.requestId);
  if (request === undefined) return [];
  const why: string[] = [
    `${own.slotMin} min here: ${own.offer.words} (${chanceWords(own.offer.chance)} chance to end inside).`,
  ];
  let more: { readonly scannerId: string; readonly offer: Offer } | undefined;
  for (const [scannerId, offers] of request.offers)
    for (const offer of offers)
      if (offer.diagnostic > (more?.offer.diagnostic ?? own.offer.diagnostic))
        more = { scannerId, offer };
  why.push(
    more === undefined
      ? 'No other scanner or longer slot answers more diagnostically.'
      : `${scannerName(more.scannerId, problem.department)} in ${more.offer.slotMin} min would answer more (weight ${more.offer.diagnostic} instead of ${own.offer.diagnostic} diagnostic); that time went to answers that count more in all, or the search found no room.`,
  );
  if (request.dueDate !== undefined)
    why.push(
      own.date <= request.dueDate
        ? `By its due date ${request.dueDate}.`
        : `After its due date ${request.dueDate}: no room by then without taking it from answers that count more, as far as the search found.`,
    );
  const others = placed.filter((p) => p.requestId !== own.requestId);
  const earlier = earliestFree(
    problem,
    others,
    request,
    (scanner) =>
      request.offers
        .get(scanner.id)
        ?.filter((o) => o.diagnostic >= own.offer.diagnostic && o.screening >= own.offer.screening)
        .map((o) => o.slotMin)[0],
  );
  const sooner =
    earlier !== undefined &&
    (earlier.date < own.date || (earlier.date === own.date && earlier.startMin < own.startMin));
  why.push(
    sooner
      ? `Sooner is free (${at(problem, earlier)}); this place has less risk of overrun or fewer coil changes.`
      : 'No sooner place with these answers is free beside the others.',
  );
  const before = [...problem.taken, ...placed]
    .filter(
      (p) => p.scannerId === own.scannerId && p.date === own.date && p.startMin < own.startMin,
    )
    .sort((a, b) => b.startMin - a.startMin)[0];
  const coilBefore =
    before === undefined
      ? undefined
      : 'coil' in before
        ? (before.coil as string | undefined)
        : problem.waiting.find((r) => r.id === before.requestId)?.coil;
  if (before !== undefined && coilBefore === request.coil)
    why.push(`The ${request.coil} coil is already on the table from ${before.requestId}.`);
  return why;
}

/** Why a request found no place, and what would make one. */
export function whyWaiting(
  problem: FillProblem,
  placed: readonly Placed[],
  request: WaitingRequest,
): NotPlaced {
  const requestId = request.id;
  if (request.offers.size === 0) {
    const reasons = [...(request.cannot ?? [])].map(([id, why]) => `${id}: ${why}`);
    return {
      requestId,
      why: `No scanner can take it. ${reasons.join(' ')}`.trim(),
      ways: [{ kind: 'scanner', sentence: 'A scanner with the coil and abilities it needs.' }],
    };
  }
  const days = problem.department.days.filter((d) => dateRefusal(request, d) === undefined);
  const free = { ...request, canCome: { partOfDay: 'any' as const } };
  const otherTime = earliestFree(
    problem,
    placed,
    { ...free, dueDate: '9999-12-31' },
    (s) => request.offers.get(s.id)?.[0]?.slotMin,
  );
  const ways: WayIn[] = [];
  const shortest = Math.min(
    ...[...request.offers.values()].flatMap((offers) => offers.map((o) => o.slotMin)),
  );
  if (days.length > 0) ways.push(...roomMade(problem, placed, request, days));
  if (otherTime !== undefined) {
    const offer = request.offers.get(otherTime.scannerId)?.[0];
    const late =
      request.dueDate !== undefined && otherTime.date > request.dueDate
        ? ` (after its due date ${request.dueDate})`
        : '';
    ways.push({
      kind: 'other time',
      sentence: `If the visit can be on ${at(problem, otherTime)}${late}: ${otherTime.slotMin} min are free there: ${offer?.words ?? ''}.`,
    });
  }
  ways.push({
    kind: 'other day',
    sentence: `A further day on a scanner of ${[...request.offers.keys()].join(', ')}.`,
  });
  if (days.length === 0) {
    const refusals = [
      ...new Set(problem.department.days.map((d) => dateRefusal(request, d) ?? '')),
    ];
    return { requestId, why: `On none of the planned days: ${refusals.join('; ')}.`, ways };
  }
  const longest = Math.max(
    0,
    ...days.flatMap((d) =>
      problem.department.scanners
        .filter((s) => request.offers.has(s.id))
        .flatMap((s) => freeBeside(problem, placed, s, d))
        .filter((gap) => startIn(gap, request, 5) !== undefined)
        .map((gap) => gap.toMin - (startIn(gap, request, 5) ?? gap.toMin)),
    ),
  );
  const team = request.team === undefined ? '' : ` together with ${request.team}`;
  return {
    requestId,
    why:
      longest < shortest
        ? `It needs ${shortest} min at least${partWords(request)}; the longest stretch left on scanners and days that suit it is ${longest} min. The rest went to answers that count more.`
        : `No free stretch fits it${partWords(request)}${team}.`,
    ways,
  };
}

/** Longer hours, a shorter slot for a neighbour with what that neighbour would lose, or a place instead of somebody. */
function roomMade(
  problem: FillProblem,
  placed: readonly Placed[],
  request: WaitingRequest,
  days: readonly string[],
): readonly WayIn[] {
  let hours: { readonly extraMin: number; readonly sentence: string } | undefined;
  let shorter: { readonly loss: number; readonly sentence: string } | undefined;
  let instead: { readonly worth: number; readonly sentence: string } | undefined;
  const ownWorth = priorityWorth[request.priority];
  for (const date of days)
    for (const scanner of problem.department.scanners) {
      const offer = request.offers.get(scanner.id)?.[0];
      if (offer === undefined) continue;
      const gaps = freeBeside(problem, placed, scanner, date);
      const closing = Math.max(...scanner.hours.map((h) => h.toMin));
      const tail = gaps.find((g) => g.toMin === closing) ?? { fromMin: closing, toMin: closing };
      const start = startIn({ fromMin: tail.fromMin, toMin: 24 * 60 }, request, offer.slotMin);
      const extraMin = start === undefined ? Infinity : start + offer.slotMin - closing;
      if (extraMin > 0 && extraMin <= 180 && extraMin < (hours?.extraMin ?? Infinity))
        hours = {
          extraMin,
          sentence: `${extraMin} min longer on ${scanner.id}, ${date} (until ${clock(closing + extraMin)}): ${offer.slotMin} min there: ${offer.words}.`,
        };
      for (const other of placed) {
        if (other.scannerId !== scanner.id || other.date !== date) continue;
        const theirs = problem.waiting.find((r) => r.id === other.requestId);
        if (theirs === undefined) continue;
        const fromMin = gaps.find((g) => g.toMin === other.startMin)?.fromMin ?? other.startMin;
        const end = other.startMin + other.slotMin;
        const toMin = gaps.find((g) => g.fromMin === end)?.toMin ?? end;
        if (startIn({ fromMin, toMin }, request, offer.slotMin) !== undefined) {
          const worth = priorityWorth[theirs.priority] * other.offer.diagnostic;
          if (worth < (instead?.worth ?? Infinity) && priorityWorth[theirs.priority] <= ownWorth)
            instead = {
              worth,
              sentence: `Instead of ${other.requestId} (${theirs.priority}) on ${at(problem, other)}, who would wait: ${offer.slotMin} min there: ${offer.words}.`,
            };
        }
        for (const less of theirs.offers.get(scanner.id) ?? []) {
          if (less.slotMin >= other.slotMin) continue;
          // The other keeps the start; the request takes what is freed behind.
          const freed = { fromMin: other.startMin + less.slotMin, toMin };
          if (startIn(freed, request, offer.slotMin) === undefined) continue;
          const loss = priorityWorth[theirs.priority] * (other.offer.diagnostic - less.diagnostic);
          if (loss < (shorter?.loss ?? Infinity))
            shorter = {
              loss,
              sentence: `${other.requestId} (${at(problem, other)}) in ${less.slotMin} instead of ${other.slotMin} min, who would get: ${less.words}; then this one gets ${offer.slotMin} min: ${offer.words}.`,
            };
        }
      }
    }
  return [
    ...(hours === undefined ? [] : [{ kind: 'longer hours' as const, sentence: hours.sentence }]),
    ...(shorter === undefined
      ? []
      : [{ kind: 'shorter slot' as const, sentence: shorter.sentence }]),
    ...(instead === undefined ? [] : [{ kind: 'instead of' as const, sentence: instead.sentence }]),
  ];
}
