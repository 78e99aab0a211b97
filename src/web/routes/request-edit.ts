import { Router, type Request } from 'express';
import type { StoredRequest } from '../../store/index.js';
import type { Problem } from '../../shared/index.js';
import type { PageDeps } from '../deps.js';
import { summaryOf } from '../planner.js';
import { requestPage } from '../request-page.js';
import { formValues, readForm, valuesOf, type FormValues } from '../view-models/request-form.js';
import { whoIs } from '../who.js';

/** Changing a request; a booked one keeps its place and gets a new plan. */
export function requestEditRoutes(deps: PageDeps): Router {
  const router = Router();
  const { planner } = deps;
  const page = requestPage(deps);

  router.get('/requests/:id/edit', async (request, response, next) => {
    const stored = await deps.store.requests.get(String(request.params.id));
    if (stored === undefined) return next();
    await page.show(response, valuesOf(stored.body), [], {
      kind: 'edit',
      id: stored.id,
      version: stored.version,
    });
  });

  router.post('/requests/:id/edit', async (request, response, next) => {
    const stored = await deps.store.requests.get(String(request.params.id));
    if (stored === undefined) return next();
    const values: FormValues = {
      ...formValues(request.body as Record<string, unknown>),
      request_id: stored.id,
    };
    const mode = { kind: 'edit', id: stored.id, version: Number(values['version']) } as const;
    const read = readForm(values);
    if (values['look'] !== undefined || read.kind === 'refused') {
      await page.show(
        response,
        values,
        read.kind === 'refused' && values['look'] === undefined ? read.problems : [],
        mode,
      );
      return;
    }
    const changed = await deps.store.requests.change(
      stored.id,
      mode.version,
      { body: read.value.request },
      whoIs(request),
      deps.now(),
    );
    if (changed.kind !== 'changed') {
      await page.show(response, values, [notSaved(changed)], {
        kind: 'edit',
        id: stored.id,
        version: stored.version,
      });
      return;
    }
    await planAgain(changed.request, request);
    response.redirect(303, `/requests/${encodeURIComponent(stored.id)}`);
  });

  /** A booked request that was changed keeps its place; its plan is made anew, so that the board shows what it gets now. */
  async function planAgain(stored: StoredRequest, request: Request) {
    const booking = await deps.store.bookings.ofRequest(stored.id);
    const scanner = deps.department.scanners.find((s) => s.id === booking?.scannerId);
    if (booking === undefined || scanner === undefined || booking.plan !== null) return;
    const outcome = await planner.plan(stored.body, scanner, booking.slotMin * 60);
    if (outcome.kind === 'refused') return;
    await deps.store.bookings.keepPlan(
      booking.id,
      booking.version,
      summaryOf(outcome.plan),
      whoIs(request),
      deps.now(),
    );
  }

  return router;
}

/** Why a change was not saved, with the answers still in the form. */
function notSaved(outcome: { readonly kind: string; readonly why: string }): Problem {
  return outcome.kind === 'stale'
    ? {
        code: 'stale',
        thing: 'the form',
        value: 'somebody else changed this request meanwhile',
        limit: 'only the newest version can be changed',
        wayOut:
          'Your answers are still here. Open the request in another tab, compare, and save again.',
      }
    : {
        code: 'refused',
        thing: 'the form',
        value: outcome.why,
        limit: 'nothing was changed',
        wayOut: 'Your answers are still here. Open the day board to see what stands in the way.',
      };
}
