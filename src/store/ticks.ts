import { ProblemError } from '../shared/index.js';

export const tickMin = 5;
const ticksPerDay = (24 * 60) / tickMin;
const dayMs = 86_400_000;
const longestSlotMin = 24 * 60;

/** Where and how long: what a booking claims. */
export interface Place {
  readonly scannerId: string;
  /** ISO date on the site's own calendar. */
  readonly date: string;
  /** Whole minutes since the site's midnight. */
  readonly startMin: number;
  readonly slotMin: number;
  readonly teams: readonly string[];
}

/** Every resource that a place needs for its whole slot. */
export function resourcesOf(place: Place): readonly string[] {
  return [`scanner:${place.scannerId}`, ...new Set(place.teams.map((team) => `team:${team}`))];
}

/**
 * The five-minute pieces that a place touches, counted from 1970-01-01 00:00 on the site's calendar;
 * `toTick` not included. A piece that is only partly used counts whole, so no overlap is too short to see.
 */
export function ticksOf(place: Place): { readonly fromTick: number; readonly toTick: number } {
  const dayStart = dayNumber(place.date) * ticksPerDay;
  return {
    fromTick: dayStart + Math.floor(place.startMin / tickMin),
    toTick: dayStart + Math.ceil((place.startMin + place.slotMin) / tickMin),
  };
}

/** Days since 1970-01-01; the calendar has no zone here. */
function dayNumber(date: string): number {
  return Date.parse(`${date}T00:00:00Z`) / dayMs;
}

/** Throws when a place cannot be written: callers check what people typed before they come here. */
export function assertPlace(place: Place): void {
  const refuse = (field: string, value: string, limit: string): never => {
    throw new ProblemError({
      code: 'booking-place',
      thing: `booking, field ${field}`,
      value,
      limit,
      wayOut: 'Correct the field and place the booking again.',
    });
  };
  const { scannerId, date, startMin, slotMin, teams } = place;
  if (scannerId === '') refuse('scanner', 'empty', 'a booking names its scanner');
  if (teams.includes('')) refuse('teams', 'an empty name', 'every team has an id');
  const day = dayNumber(date);
  const isDay = /^\d{4}-\d{2}-\d{2}$/.test(date) && Number.isInteger(day);
  if (!isDay || new Date(day * dayMs).toISOString().slice(0, 10) !== date) {
    refuse('date', `"${date}"`, 'a day of the calendar as year-month-day');
  }
  if (!Number.isInteger(startMin) || startMin < 0 || startMin >= 24 * 60) {
    refuse('start', `${startMin} min`, 'whole minutes since midnight, 0 to 1439');
  }
  if (!Number.isInteger(slotMin) || slotMin < 1 || slotMin > longestSlotMin) {
    refuse('slot', `${slotMin} min`, `whole minutes, 1 to ${longestSlotMin}`);
  }
}
