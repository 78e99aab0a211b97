import { Router } from 'express';
import type { PageDeps } from '../deps.js';
import { siteNow } from '../past-places.js';
import { siteDate, workingDays } from '../site-time.js';
import { bestPlaces } from '../view-models/best-places.js';

/** Working days looked ahead. */
const daysAhead = 14;

/** The best places for one request over the coming days, each with what the patient would get. */
export function placesRoutes(deps: PageDeps): Router {
  const router = Router();
  router.get('/requests/:id/places', async (request, response, next) => {
    const stored = await deps.store.requests.get(String(request.params.id));
    if (stored === undefined) return next();
    const today = siteDate(deps.now(), deps.department.zone);
    const coming = deps.department.days.filter((day) => day >= today);
    const from = coming[0] ?? today;
    const days = [...new Set([...coming, ...workingDays(from, 2 * daysAhead)])]
      .sort()
      .slice(0, daysAhead);
    const bookings = await deps.store.bookings.listBetween(days[0]!, days[days.length - 1]!);
    response.render('places', {
      title: `Places for ${stored.id}`,
      stored,
      exam: deps.ground.library.exams.get(stored.body.examId)?.name ?? stored.body.examId,
      from: days[0],
      until: days[days.length - 1],
      offers: await bestPlaces({
        stored,
        department: deps.department,
        days,
        bookings,
        planner: deps.planner,
        now: siteNow(deps),
      }),
    });
  });
  return router;
}
