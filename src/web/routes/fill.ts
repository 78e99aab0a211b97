import { Router } from 'express';
import { ProblemError } from '../../shared/index.js';
import type { StoredRequest } from '../../store/index.js';
import type { PageDeps } from '../deps.js';
import { daysAsked } from '../fill-asked.js';
import { proposeQuickly } from '../fill-proposal.js';
import { placeRequest, type WantedPlace } from '../place-request.js';
import { isDay } from '../site-time.js';
import { takeTold, tell } from '../told.js';
import { fillView, searchLengths } from '../view-models/fill-page.js';
import { whoIs } from '../who.js';

/** Fill: a proposal for everybody who waits; the scheduler accepts all, some or none of it. */
export function fillRoutes(deps: PageDeps): Router {
  const router = Router();
  const { store, department } = deps;

  router.get('/fill', async (request, response) => {
    const all = await store.requests.list();
    const waitingCount = all.filter((r) => r.status === 'waiting').length;
    const days = daysAsked(deps, request.query['from'], request.query['until']);
    const asked = request.query['propose'] === '1' && waitingCount > 0;
    response.render('fill', {
      title: 'Fill the days',
      from: days[0],
      until: days[days.length - 1],
      waitingCount,
      searchLengths,
      told: takeTold(request, response),
      proposed: asked ? fillView(await proposeQuickly(deps, days), department) : undefined,
    });
  });

  router.post('/fill', async (request, response) => {
    const chosen = (request.body as Record<string, unknown>)['place'];
    const values = (Array.isArray(chosen) ? chosen : chosen === undefined ? [] : [chosen]).map(
      String,
    );
    const refusals: string[] = [];
    let placed = 0;
    for (const value of values) {
      const [requestId = '', scannerId = '', date = '', start, slot] = value.split('|');
      const refusal = await placeOne(requestId, scannerId, date, Number(start), Number(slot));
      if (refusal === undefined) placed += 1;
      else refusals.push(refusal);
    }
    const text = `${placed} of ${values.length} placed.${refusals.length > 0 ? ` Not placed: ${refusals.join('; ')}.` : ''}`;
    tell(response, refusals.length === 0 ? 'told' : 'refused', text);
    response.redirect(303, '/fill');

    async function placeOne(
      requestId: string,
      scannerId: string,
      date: string,
      startMin: number,
      slotMin: number,
    ) {
      const stored = await store.requests.get(requestId);
      const scanner = department.scanners.find((s) => s.id === scannerId);
      if (
        stored === undefined ||
        scanner === undefined ||
        !isDay(date) ||
        !Number.isInteger(startMin) ||
        !Number.isInteger(slotMin)
      ) {
        return `${requestId}: the proposal could not be read`;
      }
      const result = await tried(stored, { scanner, date, startMin, slotMin }, whoIs(request));
      if (typeof result === 'string') return `${requestId}: ${result}`;
      if (result.kind === 'placed') return undefined;
      return result.kind === 'taken'
        ? `${requestId}: the place went to ${result.by.requestId} meanwhile`
        : `${requestId}: ${result.why}`;
    }
  });

  /** A refusal of one place must not lose the others. */
  async function tried(stored: StoredRequest, place: WantedPlace, who: string) {
    try {
      return await placeRequest(deps, stored, place, who);
    } catch (error) {
      if (error instanceof ProblemError) return error.problem.limit;
      throw error;
    }
  }

  return router;
}
