import { canComeAt, clock, freeGaps, type Department } from '../../day/index.js';
import { rankOf } from '../../exams/index.js';
import type { Plan } from '../../planning/index.js';
import type { StoredBooking, StoredRequest } from '../../store/index.js';
import { notBefore } from '../past-places.js';
import type { Planner } from '../planner.js';
import { chanceWords } from './day-board.js';

/** One place a request could have, with what the patient would get there. */
export interface PlaceOffer {
  readonly scannerId: string;
  readonly scanner: string;
  readonly date: string;
  readonly start: string;
  readonly slotMin: number;
  readonly chance: string;
  readonly late: boolean;
  readonly answers: Plan['answers'];
}

const mostOffers = 10;

/**
 * The ten best places over the given days: inside the due date first, then by what the questions get, weighted, then
 * the earliest. Each gap offers its first start at which the patient can come.
 */
export async function bestPlaces(input: {
  readonly stored: StoredRequest;
  readonly department: Department;
  readonly days: readonly string[];
  readonly bookings: readonly StoredBooking[];
  readonly planner: Planner;
  /** The site's date and minute: nothing before it is offered. */
  readonly now: { readonly date: string; readonly minute: number };
}): Promise<readonly PlaceOffer[]> {
  const { stored, department, days, bookings, planner, now } = input;
  const { body } = stored;
  const slotMin = Math.ceil(body.slotS / 60);
  const offers: (PlaceOffer & { readonly worth: number })[] = [];
  for (const scanner of department.scanners) {
    const outcome = await planner.plan(body, scanner);
    if (outcome.kind === 'refused') continue;
    const { plan } = outcome;
    const worth = plan.answers.reduce((sum, a) => sum + a.weight * 4 ** rankOf(a.grade), 0);
    for (const date of days) {
      const own = bookings.filter((b) => b.scannerId === scanner.id && b.date === date);
      for (const gap of freeGaps(scanner, own)) {
        const fromMin = date === now.date ? notBefore(gap.fromMin, now.minute) : gap.fromMin;
        const fit = canComeAt(body.canCome, date, { ...gap, fromMin }, slotMin);
        if ('why' in fit) continue;
        offers.push({
          scannerId: scanner.id,
          scanner: scanner.name,
          date,
          start: clock(fit.startMin),
          slotMin,
          chance: chanceWords(plan.chanceToFinish),
          late: body.dueDate !== undefined && date > body.dueDate,
          answers: plan.answers,
          worth,
        });
      }
    }
  }
  return offers
    .sort(
      (a, b) =>
        Number(a.late) - Number(b.late) ||
        b.worth - a.worth ||
        a.date.localeCompare(b.date) ||
        a.start.localeCompare(b.start) ||
        a.scannerId.localeCompare(b.scannerId),
    )
    .slice(0, mostOffers);
}
