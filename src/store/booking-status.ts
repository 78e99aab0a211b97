import type { RequestStatus } from './tables.js';

/** Appointment status codes of HL7 FHIR R4 that a booking can have. */
export const bookingStatuses = ['booked', 'arrived', 'fulfilled', 'cancelled', 'noshow'] as const;
export type BookingStatus = (typeof bookingStatuses)[number];

/** Whether a booking with this status keeps its scanner and teams from others. */
export const holdsItsPlace = (status: BookingStatus) =>
  status === 'booked' || status === 'arrived' || status === 'fulfilled';

/** Where a request stands when its latest booking has this status. */
export const requestStatusWith: Readonly<Record<BookingStatus, RequestStatus>> = {
  booked: 'booked',
  arrived: 'booked',
  fulfilled: 'done',
  cancelled: 'waiting',
  noshow: 'waiting',
};

/**
 * Which status may follow which by hand. `fulfilled` is reached by recording the answers of the exam,
 * never by a status alone: an exam filed as done without grades would leave nothing on the list of
 * answers owed.
 */
export const mayFollow: Readonly<Record<BookingStatus, readonly BookingStatus[]>> = {
  booked: ['arrived', 'cancelled', 'noshow'],
  arrived: ['booked', 'cancelled'],
  fulfilled: [],
  noshow: ['booked', 'arrived', 'cancelled'],
  cancelled: ['booked'],
};
