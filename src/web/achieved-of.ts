import { achievedFrom, foldEvents } from '../console/index.js';
import { examOf } from '../planning/index.js';
import type { StoredBooking, StoredRequest } from '../store/index.js';
import type { AchievedRecord } from '../tolerance/index.js';
import type { PageDeps } from './deps.js';
import { isBySlot } from './exam-clock.js';
import { planSummary } from './planner.js';
import { instantOf, siteDate } from './site-time.js';

/** What the taps of a booking's exam show of the patient and the time; nothing where nothing was tapped. */
export async function achievedOf(
  deps: Pick<PageDeps, 'store' | 'ground' | 'department' | 'now'>,
  booking: StoredBooking,
  { body }: StoredRequest,
): Promise<readonly AchievedRecord[]> {
  const { store, ground, department } = deps;
  const events = await store.consoleLog.list(booking.id);
  const scanner = department.scanners.find((s) => s.id === booking.scannerId);
  const found = examOf(body, ground.library);
  if (events.length === 0 || scanner === undefined || found.kind === 'refused') return [];
  const state = foldEvents(events, body.tolerance);
  const fromS = await entryFromS(deps, booking);
  const plan = planSummary.safeParse(booking.plan);
  return achievedFrom({ request: body, ...found.value, scanner, ground }, state, {
    on: siteDate(deps.now(), department.zone),
    ...(fromS === undefined ? {} : { entryFromS: fromS }),
    // The end is tapped before the patient gets out.
    ...(plan.success
      ? { plannedS: plan.data.medianS - ground.library.policy.time.exit.value.meanS }
      : {}),
  });
}

/**
 * Start of the slot, or the arrival where that was later, s on the exam's clock. Unknown where the clock was not the slot's, and
 * where the exam before it on the scanner was still running then: waiting for the scanner is not getting in.
 */
async function entryFromS(
  { store, department }: Pick<PageDeps, 'store' | 'department'>,
  booking: StoredBooking,
): Promise<number | undefined> {
  const slotMs = instantOf(booking.date, booking.startMin, department.zone);
  const zeroMs = await store.consoleLog.zeroMs(booking.id);
  if (zeroMs === undefined || !isBySlot(zeroMs, slotMs)) return undefined;
  if (await scannerWasTaken(store, booking, slotMs)) return undefined;
  const changes = await store.history.of('booking', booking.id);
  const arrivedMs = changes.findLast((c) => c.action === 'arrived')?.atMs ?? slotMs;
  return Math.max(0, (arrivedMs - slotMs) / 1000);
}

/** Whether an earlier exam of the day, by its own taps, was on the scanner when this one's slot began. */
async function scannerWasTaken(
  store: PageDeps['store'],
  { id, scannerId, date, startMin }: StoredBooking,
  slotMs: number,
): Promise<boolean> {
  const day = await store.bookings.listDay(date);
  const earlier = day.filter(
    (b) => b.scannerId === scannerId && b.startMin < startMin && b.id !== id,
  );
  const before = earlier.sort((a, b) => b.startMin - a.startMin)[0];
  if (before === undefined) return false;
  const zeroMs = await store.consoleLog.zeroMs(before.id);
  if (zeroMs === undefined) return false;
  const ended = (await store.consoleLog.list(before.id)).findLast((e) => e.kind === 'ended');
  return ended === undefined || zeroMs + ended.atS * 1000 > slotMs;
}
