import { Router } from 'express';
import { clock } from '../../day/index.js';
import { ProblemError } from '../../shared/index.js';
import type { StoredRequest } from '../../store/index.js';
import type { PageDeps } from '../deps.js';
import { proposeFill } from '../fill-proposal.js';
import { placeRequest, type WantedPlace } from '../place-request.js';
import { dayFrom, isDay, siteDate } from '../site-time.js';
import { takeTold, tell } from '../told.js';
import { whoIs } from '../who.js';

/** Fill: a proposal for everybody who waits; the scheduler accepts all, some or none of it. */
export function fillRoutes(deps: PageDeps): Router {
  const router = Router();
  const { store, department } = deps;

  router.get('/fill', async (request, response) => {
    const all = await store.requests.list();
    const waiting = all.filter((r) => r.status === 'waiting');
    const days = daysAsked(request.query['from'], request.query['until']);
    const asked = request.query['propose'] === '1' && waiting.length > 0;
    const bookings = asked
      ? await store.bookings.listBetween(days[0]!, days[days.length - 1]!)
      : [];
    const made = asked
      ? await proposeFill(deps, days, waiting, bookings, new Map(all.map((r) => [r.id, r])))
      : undefined;
    response.render('fill', {
      title: 'Fill the days',
      from: days[0],
      until: days[days.length - 1],
      waitingCount: waiting.length,
      told: takeTold(request, response),
      proposal: made?.proposal,
      placements: made?.proposal.placements.map((p) => ({
        ...p,
        start: clock(p.startMin),
        scanner: department.scanners.find((s) => s.id === p.scannerId)?.name ?? p.scannerId,
        value: [p.requestId, p.scannerId, p.date, p.startMin, p.slotMin].join('|'),
      })),
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

  /** The department's coming days, or the ones asked for, two weeks at most. */
  function daysAsked(from: unknown, until: unknown): readonly string[] {
    const today = siteDate(deps.now(), department.zone);
    const own = department.days.filter((d) => d >= today);
    const first = typeof from === 'string' && isDay(from) ? from : (own[0] ?? today);
    const last =
      typeof until === 'string' && isDay(until) && until >= first
        ? until
        : (own[own.length - 1] ?? first);
    const days = Array.from({ length: 14 }, (_, n) => dayFrom(first, n));
    return days.filter((d) => d <= last || d === first);
  }

  return router;
}
