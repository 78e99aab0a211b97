import { clock, type DayEvent, type Department } from '../day/index.js';
import { ProblemError, type Problem } from '../shared/index.js';
import type { StoredBooking } from '../store/index.js';
import { readClock } from './board-fields.js';
import { dayFrom, isDay, workingDays } from './site-time.js';

/** What can happen to a day, as the page's address names it. */
export const happenings = [
  'down',
  'staff',
  'team',
  'late',
  'overrun',
  'no-show',
  'emergency',
] as const;
export type Happening = (typeof happenings)[number];
export const befallsPatient = (what: Happening | undefined) =>
  what === 'late' || what === 'overrun' || what === 'no-show';

type FieldName =
  | 'scanner'
  | 'from'
  | 'to'
  | 'booking'
  | 'minutes'
  | 'team'
  | 'request'
  | 'today'
  | 'now'
  | 'before'
  | 'until';

interface Moment {
  readonly date: string;
  readonly minute: number;
}

/** An event as it was asked about; of an emergency only the request's number. */
export type AskedEvent =
  | Exclude<DayEvent, { readonly kind: 'emergency' }>
  | { readonly kind: 'emergency'; readonly requestId: string };

/** The page's address, read: fields as the form shows them, and what they mean. */
export interface MendAsked {
  readonly what: Happening | undefined;
  readonly day: string;
  readonly fields: Readonly<Record<FieldName, string>>;
  readonly now: Moment;
  readonly movableFrom: Moment;
  /** Days on which places are looked for, the event's own first. */
  readonly days: readonly string[];
  /** There when a proposal was asked for and the fields make sense. */
  readonly event?: AskedEvent;
  readonly problems: readonly Problem[];
}

const onTheWayMin = 60;
/** Somebody called in from a ward for a place that fell free. */
const calledInMin = 30;
const lastMinute = 24 * 60 - 1;
const longestMin = 480;
const mostDays = 14;

/**
 * Reads the address. The clock is the site's where today is a planned day; elsewhere (the demo) it stands on the day looked
 * at, when the event begins.
 */
export function readMend(
  query: Readonly<Record<string, unknown>>,
  site: {
    readonly department: Department;
    readonly clock: Moment;
    /** The booking named in the address, whatever its status. */
    readonly booking: StoredBooking | undefined;
  },
): MendAsked {
  const { department, booking } = site;
  const text = (name: string) => {
    const value = query[name];
    return typeof value === 'string' && value.trim() !== '' ? value.trim() : undefined;
  };
  const problems: Problem[] = [];
  const asked = text('propose') === '1';
  const what = happenings.find((h) => h === text('what'));
  const onPlannedDay = department.days.includes(site.clock.date);
  const dayText = text('day');
  const lookedAt =
    booking?.date ??
    (dayText !== undefined && isDay(dayText)
      ? dayText
      : onPlannedDay
        ? site.clock.date
        : (department.days[0] ?? site.clock.date));
  const date = (name: string, otherwise: string) => {
    const value = text(name);
    return value !== undefined && isDay(value) ? value : otherwise;
  };
  const today = date('today', onPlannedDay ? site.clock.date : lookedAt);
  // An emergency is scanned today, whichever day was looked at.
  const day = what === 'emergency' ? today : lookedAt;
  const time = (name: string, label: string, otherwise: number): number => {
    const value = text(name);
    if (value === undefined) return otherwise;
    try {
      return readClock(value);
    } catch (error) {
      if (!(error instanceof ProblemError)) throw error;
      problems.push({ ...error.problem, thing: label });
      return otherwise;
    }
  };
  const running = today === site.clock.date ? site.clock.minute : undefined;
  const opens = Math.min(...department.scanners.flatMap((s) => s.hours.map((h) => h.fromMin)));
  const fromMin = time('from', 'From', running ?? opens + 120);
  const toMin = time('to', 'To', Math.min(fromMin + 120, lastMinute));
  const nowMin = time('now', 'It is now', running ?? booking?.startMin ?? fromMin);
  const usual = Math.min(nowMin + (what === 'no-show' ? calledInMin : onTheWayMin), lastMinute);
  const given = time('before', 'People who start before', usual);
  const beforeMin = given < nowMin ? usual : given;
  const last = department.days[department.days.length - 1] ?? day;
  const next = workingDays(dayFrom(day, 1), 4)[0]!;
  const until = date('until', last > day ? last : next);
  const scannerId = text('scanner') ?? booking?.scannerId ?? department.scanners[0]?.id ?? '';
  const minutesText = text('minutes') ?? '20';
  const event = asked ? readEvent() : undefined;
  if (asked && what !== undefined && event !== undefined && day < today)
    problems.push(problem('Day', day, `today is ${today}`, 'Choose a day that is not over.'));

  return {
    what,
    day,
    fields: {
      scanner: scannerId,
      from: text('from') ?? clock(fromMin),
      to: text('to') ?? clock(toMin),
      booking: booking?.id ?? '',
      minutes: minutesText,
      team: text('team') ?? '',
      request: text('request') ?? '',
      today,
      now: text('now') ?? clock(nowMin),
      before: given < nowMin ? clock(usual) : (text('before') ?? clock(beforeMin)),
      until,
    },
    now: { date: today, minute: nowMin },
    movableFrom: { date: today, minute: beforeMin },
    days: [...new Set([day, ...between()])].sort().slice(0, mostDays),
    ...(event === undefined || problems.length > 0 ? {} : { event }),
    problems,
  };

  function between(): readonly string[] {
    return [...department.days, ...workingDays(day, 2 * mostDays)].filter(
      (d) => d > day && d <= until,
    );
  }

  function readEvent(): AskedEvent | undefined {
    const stretch = { date: day, fromMin, toMin };
    const ends = () => {
      if (toMin <= fromMin)
        problems.push(
          problem('To', clock(toMin), `it must be after ${clock(fromMin)}`, 'Correct the times.'),
        );
    };
    switch (what) {
      case undefined:
        return undefined;
      case 'down':
      case 'staff':
        if (!department.scanners.some((s) => s.id === scannerId))
          problems.push(problem('Scanner', `"${scannerId}"`, 'not one of ours', 'Choose one.'));
        ends();
        return { kind: what === 'down' ? 'scanner down' : 'staff gone', scannerId, ...stretch };
      case 'team': {
        const team = text('team');
        ends();
        if (team === undefined)
          problems.push(problem('Team', 'none', 'a team must be chosen', 'Choose one.'));
        return team === undefined ? undefined : { kind: 'team gone', team, ...stretch };
      }
      case 'emergency': {
        const requestId = text('request');
        if (requestId === undefined)
          problems.push(problem('Request', 'none', 'a request must be chosen', 'Choose one.'));
        return requestId === undefined ? undefined : { kind: 'emergency', requestId };
      }
      default:
        return readPatientEvent(what);
    }
  }

  function readPatientEvent(kind: 'late' | 'overrun' | 'no-show'): AskedEvent | undefined {
    if (booking === undefined) {
      problems.push(problem('Patient', 'none', 'a booking must be chosen', 'Choose one.'));
      return undefined;
    }
    const { requestId } = booking;
    if (kind === 'no-show') return { kind, requestId };
    const minutes = Number(minutesText);
    if (!Number.isInteger(minutes) || minutes < 1 || minutes > longestMin) {
      const limit = `whole minutes, 1 to ${longestMin}`;
      problems.push(problem('Minutes', `"${minutesText}"`, limit, 'Write for example 20.'));
    }
    return { kind, requestId, minutes };
  }
}

const problem = (thing: string, value: string, limit: string, wayOut: string): Problem => ({
  ...{ code: 'mend-asked', thing, value, limit, wayOut },
});
