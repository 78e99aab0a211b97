import { Router, type Request, type Response } from 'express';
import { clock, type Scanner } from '../../day/index.js';
import { ProblemError } from '../../shared/index.js';
import type { PlacingOutcome, StoredBooking } from '../../store/index.js';
import { gone, readClock, readSlotMin, refuseOutsideHours } from '../board-fields.js';
import { boardPage } from '../board-page.js';
import type { PageDeps } from '../deps.js';
import { placeRequest, type WantedPlace } from '../place-request.js';
import { summaryOf } from '../planner.js';
import { isDay } from '../site-time.js';
import { tell } from '../told.js';
import { whoIs } from '../who.js';

/** Changes on the board: place, move, resize, cancel, undo. The database decides; a refusal is explained on the board. */
export function bookingRoutes(deps: PageDeps): Router {
  const router = Router();
  const page = boardPage(deps);
  const { planner } = deps;

  router.post('/day/:date/place', async (request, response) => {
    const date = String(request.params.date);
    if (!isDay(date)) throw gone('day', date);
    const form = request.body as Record<string, string>;
    const stored = await deps.store.requests.get(form['request'] ?? '');
    const scanner = deps.department.scanners.find((s) => s.id === form['scanner']);
    if (stored === undefined || scanner === undefined)
      throw gone('request or scanner', `${form['request']} on ${form['scanner']}`);
    const slotMin = Math.ceil(stored.body.slotS / 60);
    const startMin = readClock(form['start'] ?? '');
    const place = { scanner, date, startMin, slotMin };
    const placed = await placeRequest(deps, stored, place, whoIs(request));
    const held =
      placed.kind === 'stale' ? await deps.store.bookings.ofRequest(stored.id) : undefined;
    if (held !== undefined) return answerHeld(response, held, place);
    await answer(
      request,
      response,
      date,
      placed,
      `${stored.id} is placed at ${clock(startMin)} on ${scanner.name}.`,
    );
  });

  router.post('/bookings/:id/move', async (request, response) => {
    const form = request.body as Record<string, string>;
    const booking = await deps.store.bookings.get(String(request.params.id));
    if (booking === undefined) throw gone('booking', String(request.params.id));
    const scanner = deps.department.scanners.find(
      (s) => s.id === (form['scanner'] ?? booking.scannerId),
    );
    if (scanner === undefined) throw gone('scanner', form['scanner'] ?? '');
    const stored = await deps.store.requests.get(booking.requestId);
    if (stored === undefined) throw gone('request', booking.requestId);
    const date = isDay(form['date'] ?? '') ? form['date']! : booking.date;
    const startMin = form['start'] === undefined ? booking.startMin : readClock(form['start']);
    const slotMin = form['slot'] === undefined ? booking.slotMin : readSlotMin(form['slot']);
    refuseOutsideHours(booking.requestId, scanner, date, startMin, slotMin, deps);
    const outcome = await planner.plan(stored.body, scanner, slotMin * 60);
    if (outcome.kind === 'refused') throw new ProblemError(outcome.problems[0]!);
    const moved = await deps.store.bookings.move(
      booking.id,
      Number(form['version'] ?? booking.version),
      { scannerId: scanner.id, date, startMin, slotMin, plan: summaryOf(outcome.plan) },
      whoIs(request),
      deps.now(),
    );
    await answer(
      request,
      response,
      date,
      moved,
      `${booking.requestId} is now at ${clock(startMin)} for ${slotMin} minutes on ${scanner.name}.`,
    );
  });

  router.post('/bookings/:id/cancel', async (request, response) => {
    const booking = await deps.store.bookings.get(String(request.params.id));
    if (booking === undefined) throw gone('booking', String(request.params.id));
    const form = request.body as Record<string, string>;
    const cancelled = await deps.store.bookings.cancel(
      booking.id,
      Number(form['version'] ?? booking.version),
      whoIs(request),
      deps.now(),
    );
    await answer(
      request,
      response,
      booking.date,
      cancelled,
      `${booking.requestId} is off the board and waits again.`,
    );
  });

  router.post('/undo', async (request, response) => {
    const form = request.body as Record<string, string>;
    const date = isDay(form['date'] ?? '') ? form['date']! : (deps.department.days[0] ?? '');
    const undone = await deps.store.history.undoLast(whoIs(request), deps.now());
    const text =
      undone.kind === 'undone' ? `Undone: ${undone.what}.` : `Not undone: ${undone.why}.`;
    tell(response, undone.kind === 'undone' ? 'told' : 'refused', text);
    response.redirect(303, `/day/${date}`);
  });

  /** A request that has its place by now: perhaps by this very form, sent twice or come back to. */
  function answerHeld(response: Response, held: StoredBooking, wanted: WantedPlace) {
    const same =
      held.scannerId === wanted.scanner.id &&
      held.date === wanted.date &&
      held.startMin === wanted.startMin;
    const name = deps.department.scanners.find((s) => s.id === held.scannerId)?.name;
    const at = `${clock(held.startMin)} on ${name ?? held.scannerId}`;
    tell(
      response,
      same ? 'told' : 'refused',
      same
        ? `${held.requestId} is placed at ${at}.`
        : `Not placed again: ${held.requestId} already has its place, ${held.date} ${at}. Nothing was changed.`,
    );
    response.redirect(303, `/day/${held.date}?booking=${encodeURIComponent(held.id)}`);
  }

  async function answer(
    request: Request,
    response: Response,
    date: string,
    outcome: PlacingOutcome,
    done: string,
  ) {
    if (outcome.kind === 'placed') {
      tell(response, 'told', done);
      response.redirect(303, `/day/${date}?booking=${encodeURIComponent(outcome.booking.id)}`);
      return;
    }
    request.params['date'] = date;
    await page.show(request, response, {
      kind: 'refused',
      text: refusalText(outcome, deps.department.scanners),
    });
  }

  return router;
}

function refusalText(
  outcome: Exclude<PlacingOutcome, { kind: 'placed' }>,
  scanners: readonly Scanner[],
): string {
  if (outcome.kind === 'taken') {
    const { requestId, scannerId, startMin, slotMin } = outcome.by;
    const name = scanners.find((s) => s.id === scannerId)?.name ?? scannerId;
    return `Not placed: ${name} is taken from ${clock(startMin)} to ${clock(startMin + slotMin)} by ${requestId}. Choose another gap; nothing was changed.`;
  }
  if (outcome.kind === 'refused') return `Not changed: ${outcome.why}.`;
  return 'Not changed: somebody else changed this booking a moment ago. What you see now is the newest; look again and repeat your change if it still fits.';
}
