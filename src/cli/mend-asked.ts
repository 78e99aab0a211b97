import type { DayEvent, Department } from '../day/index.js';
import { parseClockMin, type BookedRequest, type ReadRequests } from '../interchange/index.js';
import { ProblemError } from '../shared/index.js';
import { unknownRequests } from './ground.js';

export interface MendFlags {
  readonly down?: string;
  readonly staffGone?: string;
  readonly late?: string;
  readonly overrun?: string;
  readonly noShow?: string;
  readonly emergency?: string;
  readonly minutes?: string;
  readonly day?: string;
  readonly from?: string;
  readonly to?: string;
  readonly now?: string;
  readonly before?: string;
  readonly library?: string;
  readonly department?: string;
  readonly json?: true;
}

interface Moment {
  readonly date: string;
  readonly minute: number;
}

/** What the command line says happened, and when it is now. */
export interface MendAsked {
  readonly day: string;
  readonly now: Moment;
  readonly movableFrom: Moment;
  readonly event:
    | Exclude<DayEvent, { readonly kind: 'emergency' }>
    | { readonly kind: 'emergency'; readonly of: BookedRequest };
}

const onTheWayMin = 60;
/** Somebody called in from a ward for a place that fell free. */
const calledInMin = 30;
const lastMinute = 24 * 60 - 1;
const longestMin = 480;

const happenings = ['down', 'staffGone', 'late', 'overrun', 'noShow', 'emergency'] as const;

/**
 * Reads the flags against the file and the department.
 * @throws ProblemError for what cannot be: no event or several, unknown scanners and requests, times that are none
 */
export function readMendFlags(
  flags: MendFlags,
  read: ReadRequests,
  department: Department,
  file: string,
): MendAsked {
  const given = happenings.filter((h) => flags[h] !== undefined);
  const [what] = given;
  if (what === undefined || given.length > 1)
    throw wrong(
      'what happened',
      given.length === 0 ? 'nothing given' : given.map((g) => `--${dashed(g)}`).join(' and '),
      `one of ${happenings.map((h) => `--${dashed(h)}`).join(', ')}`,
      'Give one of them.',
    );
  const named = flags[what]!;
  const patient = what === 'late' || what === 'overrun' || what === 'noShow';
  const request = patient || what === 'emergency' ? requestNamed(named) : undefined;
  const booking = request?.booking;
  if (patient && booking === undefined)
    throw wrong(
      `request ${named}`,
      'has no place',
      'this befalls booked exams',
      'Check the number.',
    );
  if (what === 'emergency' && booking !== undefined)
    throw wrong(
      `request ${named}`,
      'has a place',
      'an emergency waits for one',
      'Check the number.',
    );
  const day = booking?.date ?? flags.day ?? department.days[0] ?? '';
  if (!department.days.includes(day))
    throw wrong(
      '--day',
      `"${day}"`,
      `the planned days: ${department.days.join(', ')}`,
      'Choose one.',
    );
  const fromMin = time('from');
  const toMin = time('to');
  const opens = Math.min(...department.scanners.flatMap((s) => s.hours.map((h) => h.fromMin)));
  const nowMin = time('now') ?? booking?.startMin ?? fromMin ?? opens;
  const usual = nowMin + (what === 'noShow' ? calledInMin : onTheWayMin);
  const now = { date: day, minute: nowMin };
  const movableFrom = { date: day, minute: time('before') ?? Math.min(usual, lastMinute) };
  return { day, now, movableFrom, event: event() };

  function event(): MendAsked['event'] {
    switch (what) {
      case 'late':
      case 'overrun':
        return { kind: what, requestId: named, minutes: minutes() };
      case 'noShow':
        return { kind: 'no-show', requestId: named };
      case 'emergency':
        return { kind: 'emergency', of: request! };
      default:
        return {
          kind: what === 'down' ? 'scanner down' : 'staff gone',
          scannerId: scanner(),
          date: day,
          ...stretch(),
        };
    }
  }

  function requestNamed(id: string): BookedRequest {
    const found = read.requests.find((r) => r.request.id === id);
    if (found === undefined) throw new ProblemError(unknownRequests([id], read, file)[0]!);
    return found;
  }

  function scanner(): string {
    const ids = department.scanners.map((s) => s.id);
    if (ids.includes(named)) return named;
    throw wrong(
      `--${dashed(what!)}`,
      `"${named}"`,
      `scanners: ${ids.join(', ')}`,
      'Name one of them.',
    );
  }

  function stretch() {
    if (fromMin === undefined || toMin === undefined || toMin <= fromMin)
      throw wrong(
        '--from and --to',
        `${flags.from ?? 'none'} to ${flags.to ?? 'none'}`,
        'the stretch that is lost, its end after its start',
        'Write for example --from 10:00 --to 14:00.',
      );
    return { fromMin, toMin };
  }

  function minutes(): number {
    const value = Number(flags.minutes);
    if (Number.isInteger(value) && value >= 1 && value <= longestMin) return value;
    throw wrong(
      '--minutes',
      `"${flags.minutes}"`,
      `a whole number, 1 to ${longestMin}`,
      'Write for example 20.',
    );
  }

  function time(name: 'from' | 'to' | 'now' | 'before'): number | undefined {
    const text = flags[name];
    if (text === undefined) return undefined;
    const minute = parseClockMin(text);
    if (minute === undefined)
      throw wrong(`--${name}`, `"${text}"`, 'a 24-hour time', 'Write for example 09:30.');
    return minute;
  }
}

const dashed = (flag: string) => flag.replace(/[A-Z]/g, (c) => `-${c.toLowerCase()}`);

const wrong = (thing: string, value: string, limit: string, wayOut: string) =>
  new ProblemError({ code: 'mend-flags', thing, value, limit, wayOut });
