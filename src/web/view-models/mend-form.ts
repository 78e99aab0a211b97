import { clock, scannerName, type Department } from '../../day/index.js';
import { priorities } from '../../planning/index.js';
import type { StoredBooking, StoredRequest } from '../../store/index.js';
import { befallsPatient, happenings, type Happening, type MendAsked } from '../mend-asked.js';
import { dayFrom } from '../site-time.js';

/** What can have happened, in the words of a desk. */
export const happeningLabels: Readonly<Record<Happening, string>> = {
  down: 'A scanner is down',
  staff: 'A scanner has no staff',
  team: 'A team is away',
  late: 'A patient is late',
  overrun: 'An exam runs over',
  'no-show': 'A patient did not come',
  emergency: 'An emergency',
};

interface Choice {
  readonly value: string;
  readonly label: string;
}

interface Link {
  readonly href: string;
  readonly label: string;
  readonly said?: string;
  readonly current: boolean;
}

/** Which fields the form shows, what can be chosen in them, and where its links lead. */
export function mendForm(input: {
  readonly asked: MendAsked;
  readonly department: Department;
  /** The day's bookings, and the one in the address. */
  readonly bookings: readonly StoredBooking[];
  readonly requests: ReadonlyMap<string, StoredRequest>;
  readonly examName: (examId: string) => string;
}) {
  const { asked, department, bookings, requests, examName } = input;
  const { what, day, fields } = asked;
  const exam = (requestId: string) => examName(requests.get(requestId)?.body.examId ?? '');
  const teams = [...new Set(bookings.flatMap((b) => b.teams))].sort();
  const address = (values: Readonly<Record<string, string>>) =>
    `/mend?${new URLSearchParams(values).toString()}`;
  const days = [...new Set([dayFrom(day, -1), ...department.days, day, dayFrom(day, 1)])].sort();
  const about = bookings.find((b) => b.id === fields.booking);
  return {
    what,
    about:
      about === undefined
        ? ''
        : `This is about ${about.requestId}, ${exam(about.requestId)}, ${clock(about.startMin)} on ${scannerName(about.scannerId, department)}, or about that scanner.`,
    label: what === undefined ? '' : happeningLabels[what],
    fields,
    day,
    whats: happenings
      .filter((h) => h !== 'team' || teams.length > 0 || what === 'team')
      .map((h): Link => ({
        href: address({
          ...{ what: h, day },
          ...(befallsPatient(h)
            ? fields.booking === ''
              ? {}
              : { booking: fields.booking }
            : { scanner: fields.scanner }),
        }),
        label: happeningLabels[h],
        current: h === what,
      })),
    days: days.map((d): Link => ({
      href: address({
        ...{ what: what ?? '', day: d },
        // An emergency is today's: another day is another today.
        ...(what === 'emergency' ? { today: d } : {}),
      }),
      label: d === day || department.days.includes(d) ? d : d < day ? '←' : '→',
      said: d === day ? d : d < day ? `An earlier day, ${d}` : `A later day, ${d}`,
      current: d === day,
    })),
    shows: {
      scanner: what === 'down' || what === 'staff',
      team: what === 'team',
      stretch: what === 'down' || what === 'staff' || what === 'team',
      booking: befallsPatient(what),
      minutes: what === 'late' || what === 'overrun',
      request: what === 'emergency',
      until: what !== 'no-show',
    },
    beforeWords: what === 'no-show' ? 'Nobody else can be here before' : 'People who start before',
    afterWords: what === 'no-show' ? '' : 'are on their way in and are not moved.',
    scanners: department.scanners.map((s): Choice => ({ value: s.id, label: s.name })),
    teams: teams.map((t): Choice => ({ value: t, label: t })),
    bookings: bookings
      .filter((b) => b.status === 'booked' || b.status === 'arrived' || b.id === fields.booking)
      .sort((a, b) => a.startMin - b.startMin || a.scannerId.localeCompare(b.scannerId))
      .map((b): Choice => ({
        value: b.id,
        label: `${clock(b.startMin)} ${b.requestId}, ${exam(b.requestId)}, ${scannerName(b.scannerId, department)}`,
      })),
    requests: [...requests.values()]
      .filter((r) => r.status === 'waiting')
      .sort(
        (a, b) =>
          priorities.indexOf(b.body.priority) - priorities.indexOf(a.body.priority) ||
          a.id.localeCompare(b.id),
      )
      .map((r): Choice => ({
        value: r.id,
        label: `${r.id}, ${examName(r.body.examId)}, ${r.body.priority}`,
      })),
  };
}
