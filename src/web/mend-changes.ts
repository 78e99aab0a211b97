import { clock, type Department } from '../day/index.js';
import { ProblemError } from '../shared/index.js';
import type { ManyChange, ManyOutcome, StoredBooking } from '../store/index.js';
import { refuseOutsideHours } from './board-fields.js';
import type { PageDeps } from './deps.js';
import { summaryOf } from './planner.js';
import { isDay } from './site-time.js';

/**
 * What accepting a proposal sends, one text a person: the booking (or request) with the version that was seen, and the
 * place it is to have.
 */
export const acceptNames = ['move', 'wait', 'longer', 'cancel', 'place'] as const;
export type AcceptName = (typeof acceptNames)[number];

export interface AcceptField {
  readonly name: AcceptName;
  readonly value: string;
}

interface Place {
  readonly scannerId: string;
  readonly date: string;
  readonly startMin: number;
  readonly slotMin: number;
}

export const acceptField = (
  name: AcceptName,
  of: { readonly id: string; readonly version: number },
  place?: Place,
): AcceptField => ({
  name,
  value: [
    ...[of.id, of.version],
    ...(place === undefined ? [] : [place.scannerId, place.date, place.startMin, place.slotMin]),
  ].join('|'),
});

/**
 * Checks hours, plans everybody anew for the place they are to have, and moves all of them at once; answers in words when
 * that cannot be, and then nothing was changed.
 */
export async function acceptMend(
  deps: PageDeps,
  form: Readonly<Record<string, unknown>>,
  who: string,
): Promise<
  | { readonly kind: 'accepted'; readonly joint: number }
  | { readonly kind: 'not accepted'; readonly why: string }
> {
  try {
    const changes: ManyChange[] = [];
    for (const name of acceptNames)
      for (const value of valuesOf(form, name))
        changes.push(await changeFor(deps, name, value.split('|')));
    const outcome = await deps.store.bookings.moveMany(changes, who, deps.now());
    return outcome.kind === 'moved'
      ? { kind: 'accepted', joint: outcome.joint }
      : { kind: 'not accepted', why: refusalWords(outcome, deps.department) };
  } catch (error) {
    if (!(error instanceof ProblemError)) throw error;
    const { thing, value, limit } = error.problem;
    return { kind: 'not accepted', why: `${thing}: ${value}, ${limit}.` };
  }
}

export function valuesOf(form: Readonly<Record<string, unknown>>, name: string): readonly string[] {
  const given = form[name];
  return (Array.isArray(given) ? given : given === undefined ? [] : [given]).map(String);
}

async function changeFor(
  deps: PageDeps,
  name: AcceptName,
  [id = '', versionText, scannerId, date = '', start, slot]: readonly string[],
): Promise<ManyChange> {
  const version = Number(versionText);
  if (!Number.isInteger(version)) throw unreadable(id);
  if (name === 'cancel') return { id, version, cancel: true };
  const startMin = Number(start);
  const slotMin = Number(slot);
  const scanner = deps.department.scanners.find((s) => s.id === scannerId);
  const sound = isDay(date) && Number.isInteger(startMin) && Number.isInteger(slotMin);
  if (scanner === undefined || !sound || slotMin < 5) throw unreadable(id);
  const booking = name === 'place' ? undefined : await deps.store.bookings.get(id);
  const requestId = name === 'place' ? id : (booking?.requestId ?? '');
  const stored = await deps.store.requests.get(requestId);
  if (stored === undefined || (name !== 'place' && booking === undefined)) throw unreadable(id);
  if (name === 'longer') refuseElsewhere(booking!, { scannerId: scanner.id, date, startMin });
  else refuseOutsideHours(requestId, scanner, date, startMin, slotMin, deps);
  if (name === 'move' && (await deps.store.consoleLog.list(id)).length > 0)
    throw new ProblemError({
      code: 'mend-started',
      thing: requestId,
      value: 'is at the scanner by now',
      limit: 'who is there is not moved',
      wayOut: 'Read the new proposal.',
    });
  const outcome = await deps.planner.plan(stored.body, scanner, slotMin * 60);
  if (outcome.kind === 'refused')
    throw new ProblemError({ ...outcome.problems[0]!, thing: requestId });
  const place = { scannerId: scanner.id, date, startMin, slotMin, plan: summaryOf(outcome.plan) };
  return name === 'place'
    ? { place: { ...place, requestId, requestVersion: version, teams: [] } }
    : { id, version, to: place };
}

/** An exam that runs over may run into a break or past the hours, but nowhere else. */
function refuseElsewhere(
  { requestId, scannerId, date, startMin }: StoredBooking,
  to: Pick<Place, 'scannerId' | 'date' | 'startMin'>,
) {
  if (scannerId === to.scannerId && date === to.date && startMin === to.startMin) return;
  throw new ProblemError({
    code: 'mend-longer',
    thing: requestId,
    value: 'was moved meanwhile',
    limit: 'an exam that runs over goes on where it is',
    wayOut: 'Read the new proposal.',
  });
}

const unreadable = (id: string) =>
  new ProblemError({
    code: 'mend-accept',
    thing: id === '' ? 'the proposal' : id,
    value: 'could not be read, or is not there any more',
    limit: 'a proposal as this page makes it',
    wayOut: 'Read the new proposal.',
  });

function refusalWords(
  outcome: Exclude<ManyOutcome, { kind: 'moved' }>,
  department: Department,
): string {
  if (outcome.kind === 'stale')
    return 'Somebody changed one of these bookings after this proposal was made.';
  if (outcome.kind === 'refused') return `${outcome.why}.`;
  const { by, wantedFor } = outcome;
  const name = department.scanners.find((s) => s.id === by.scannerId)?.name ?? by.scannerId;
  return `The place for ${wantedFor} was given away meanwhile: ${name} is taken from ${clock(by.startMin)} to ${clock(by.startMin + by.slotMin)} by ${by.requestId}.`;
}
