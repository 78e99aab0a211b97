import { randomUUID } from 'node:crypto';
import { Router, type Request } from 'express';
import { z } from 'zod';
import { foldEvents, type ConsoleHappening } from '../../console/index.js';
import { parseDurationS } from '../../interchange/index.js';
import { ProblemError } from '../../shared/index.js';
import {
  happeningSchema,
  type BookingStatus,
  type StoredBooking,
  type Tap,
} from '../../store/index.js';
import { gone } from '../board-fields.js';
import { consoleExamOf } from '../console-exam.js';
import type { PageDeps } from '../deps.js';
import { isBySlot } from '../exam-clock.js';
import { instantOf } from '../site-time.js';
import { consolePage } from '../view-models/console-page.js';
import { whoIs } from '../who.js';

const tapsBody = z.strictObject({
  taps: z
    .array(
      z.strictObject({
        tapId: z.string().min(8).max(64),
        atS: z.number().min(-86_400).max(172_800),
        happening: happeningSchema,
      }),
    )
    .max(200),
});

/** The technologist's page: one tap an event, the rest of the exam planned anew after each. */
export function consoleRoutes(deps: PageDeps): Router {
  const router = Router();

  async function opened(id: string) {
    const booking = await deps.store.bookings.get(id);
    const stored =
      booking === undefined ? undefined : await deps.store.requests.get(booking.requestId);
    const scanner = deps.department.scanners.find((s) => s.id === booking?.scannerId);
    if (booking === undefined || stored === undefined || scanner === undefined)
      throw gone('booking', id);
    const exam = consoleExamOf(deps, stored.body, scanner);
    return { booking, exam, zeroMs: await zeroOf(booking) };
  }

  /** Zero of the exam's clock: the slot's start, or the first tap where the slot is another day's. */
  async function zeroOf(booking: StoredBooking): Promise<number> {
    const slotMs = instantOf(booking.date, booking.startMin, deps.department.zone);
    if (isBySlot(deps.now(), slotMs)) return slotMs;
    return (await deps.store.consoleLog.zeroMs(booking.id)) ?? deps.now();
  }

  async function shown(id: string) {
    const { booking, exam, zeroMs } = await opened(id);
    const events = await deps.store.consoleLog.list(id);
    const slotS = booking.slotMin * 60;
    const page = consolePage(exam, events, slotS, (deps.now() - zeroMs) / 1000);
    return {
      booking,
      exam: exam.exam,
      request: exam.request,
      scanner: exam.scanner,
      zeroMs,
      slotS,
      page,
      over: overWords[booking.status],
    };
  }

  router.get('/console/:id', async (request, response) => {
    const data = await shown(String(request.params.id));
    response.render('console', {
      title: `${data.request.id} at the scanner`,
      dim: true,
      nowMs: deps.now(),
      ...data,
    });
  });

  /** Taps from the page's own script: kept once each, however often sent; answers with the page's changing part. */
  router.post('/console/:id/taps', async (request, response) => {
    const id = String(request.params.id);
    const body = tapsBody.safeParse(request.body);
    if (!body.success) {
      throw new ProblemError({
        code: 'taps',
        thing: 'taps',
        value: 'not readable',
        limit: 'taps as this page sends them',
        wayOut: 'Reload the page.',
      });
    }
    await keep(id, body.data.taps as readonly Tap[], request);
    response.set('Cache-Control', 'no-store').render('parts/console-now', await shown(id));
  });

  /** One tap as a plain form, for a page whose script does not run. */
  router.post('/console/:id', async (request, response) => {
    const id = String(request.params.id);
    const form = request.body as Record<string, string>;
    const { zeroMs, exam } = await opened(id);
    const atS = (deps.now() - zeroMs) / 1000;
    const { running } = foldEvents(await deps.store.consoleLog.list(id), exam.request.tolerance);
    const ranS = Math.max(0, atS - (running?.sinceS ?? atS));
    const tapId = /^[\w-]{8,64}$/.test(form['tap_id'] ?? '') ? form['tap_id']! : randomUUID();
    await keep(id, [{ tapId, atS, happening: readHappening(form, ranS) }], request);
    response.redirect(303, `/console/${encodeURIComponent(id)}`);
  });

  async function keep(id: string, taps: readonly Tap[], request: Request) {
    const outcome = await deps.store.consoleLog.append(id, taps, whoIs(request), deps.now());
    if (outcome.kind === 'kept') return;
    throw new ProblemError({
      code: 'tap-refused',
      thing: 'this tap',
      value: outcome.why,
      limit: 'only a booked exam that is not over takes taps',
      wayOut: 'Open the day board.',
    });
  }

  return router;
}

/** Why nothing can be tapped for a booking that is not, or no longer, to be scanned. */
const overWords: Readonly<Partial<Record<BookingStatus, string>>> = {
  fulfilled: 'This exam is done and recorded.',
  cancelled: 'This booking was taken off the board; nothing is tapped for it any more.',
  noshow: 'This patient did not come; nothing is tapped for this booking any more.',
};

/** The longest time into a sequence that a failed hold is told at, s; the log's own limit. */
const longestAfterS = 300;

/**
 * A tap from form fields; spans are written as "30 s" or "2 min". A plain form cannot count: a failed hold is dated by
 * the seconds that the sequence has been running.
 */
function readHappening(form: Readonly<Record<string, string>>, ranS: number): ConsoleHappening {
  const { kind } = form;
  const span = (field: string) => {
    const text = form[field];
    if (text === undefined || text === '') return {};
    const seconds = text === 'none' ? 0 : parseDurationS(text);
    return seconds === undefined ? {} : { [field]: { kind: 'stated', seconds } };
  };
  const candidate =
    kind === 'started'
      ? { kind, viewId: form['view'], sequenceId: form['sequence'] }
      : kind === 'put first' || kind === 'dropped'
        ? { kind, viewId: form['view'] }
        : kind === 'hold failed'
          ? { kind, afterS: Math.min(longestAfterS, ranS) }
          : kind === 'undone'
            ? { kind, taken: Number(form['taken']) }
            : kind === 'statement'
              ? { kind, ...span('still'), ...span('hold'), ...span('stay') }
              : { kind };
  const read = happeningSchema.safeParse(candidate);
  if (read.success) return read.data as ConsoleHappening;
  throw new ProblemError({
    code: 'tap',
    thing: 'this tap',
    value: `"${kind ?? ''}"`,
    limit: 'a tap this page offers',
    wayOut: 'Reload the page.',
  });
}
