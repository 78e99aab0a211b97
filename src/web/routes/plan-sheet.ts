import { Router } from 'express';
import { clock } from '../../day/index.js';
import { bestScanner } from '../../planning/index.js';
import type { PageDeps } from '../deps.js';
import { recordedAnswers } from '../recorded-answers.js';
import { siteTime } from '../site-time.js';
import { planSheet } from '../view-models/plan-sheet.js';

const longestSlotMin = 480;

/** The plan sheet of a request: a shareable address, `?slot=35` and `?scanner=mr3` look at it another way. */
export function planSheetRoutes(deps: PageDeps): Router {
  const router = Router();
  const { planner } = deps;
  router.get('/requests/:id', async (request, response, next) => {
    const stored = await deps.store.requests.get(String(request.params.id));
    if (stored === undefined) return next();
    const booking = await deps.store.bookings.ofRequest(stored.id);
    const wanted = String(request.query['scanner'] ?? booking?.scannerId ?? '');
    const scanner =
      deps.department.scanners.find((s) => s.id === wanted) ??
      bestScanner(stored.body, deps.department.scanners, deps.ground) ??
      deps.department.scanners[0]!;
    const bookedMin = booking?.slotMin ?? Math.round(stored.body.slotS / 60);
    const asked = Number(request.query['slot']);
    const slotMin =
      Number.isInteger(asked) && asked >= 5 && asked <= longestSlotMin ? asked : bookedMin;
    const outcome = await planner.plan(stored.body, scanner, slotMin * 60);
    const address = `/requests/${encodeURIComponent(stored.id)}`;
    const history = await deps.store.history.of('request', stored.id);
    response.render('plan-sheet', {
      title: `${stored.id}, plan`,
      stored,
      recorded: (await recordedAnswers(deps, [stored])).get(stored.id) ?? [],
      booking,
      place:
        booking === undefined
          ? undefined
          : `${booking.date} ${clock(booking.startMin)} to ${clock(booking.startMin + booking.slotMin)}`,
      scanner,
      scanners: deps.department.scanners,
      bookedMin,
      slotMin,
      address,
      exam: deps.ground.library.exams.get(stored.body.examId),
      problems: outcome.kind === 'refused' ? outcome.problems : [],
      sheet: outcome.kind === 'planned' ? planSheet(outcome.plan, { linkTo: address }) : undefined,
      history: history.map(({ who, action, atMs }) => ({
        who,
        action,
        when: siteTime(atMs, deps.department.zone),
      })),
    });
  });
  return router;
}
