import { Router, type Request, type Response } from 'express';
import { clock, placeWords, scannerName } from '../../day/index.js';
import { ProblemError, type Problem } from '../../shared/index.js';
import type { StoredBooking } from '../../store/index.js';
import type { PageDeps } from '../deps.js';
import { readMend, befallsPatient, type AskedEvent, type MendAsked } from '../mend-asked.js';
import { acceptMend, valuesOf } from '../mend-changes.js';
import { lookAhead, proposeMend, type MendProposal } from '../mend-proposal.js';
import { siteDate, siteMinute } from '../site-time.js';
import { takeTold, tell, type Told } from '../told.js';
import { mendDone } from '../view-models/mend-done.js';
import { mendForm } from '../view-models/mend-form.js';
import { mendViews } from '../view-models/mend-page.js';
import { whoIs } from '../who.js';

/** Something happened to a day: what it does to whom, proposals that mend it, and accepting one. */
export function mendRoutes(deps: PageDeps): Router {
  const router = Router();
  const { store, department } = deps;
  const examName = (id: string) => deps.ground.library.exams.get(id)?.name ?? id;

  router.get('/mend', (request, response) => show(request, response));

  router.post('/mend', async (request, response) => {
    const form = request.body as Record<string, unknown>;
    const address = new URLSearchParams(textsOf(request.query));
    const noShow = valuesOf(form, 'noshow')[0];
    if (noShow !== undefined) {
      const why = await markNoShow(noShow, whoIs(request));
      if (why !== undefined) return show(request, response, refusedTold(why));
      tell(response, 'told', 'Marked as not come. The request waits again.');
      response.redirect(303, `/mend?${address.toString()}`);
      return;
    }
    const accepted = await acceptMend(deps, form, whoIs(request));
    if (accepted.kind !== 'accepted') return show(request, response, refusedTold(accepted.why));
    address.delete('propose');
    address.set('done', String(accepted.joint));
    const speak = valuesOf(form, 'speak');
    if (speak.length > 0) address.set('speak', speak.join(','));
    response.redirect(303, `/mend?${address.toString()}`);
  });

  async function show(request: Request, response: Response, message?: Told) {
    const { query } = request;
    const booking =
      typeof query['booking'] === 'string' ? await store.bookings.get(query['booking']) : undefined;
    const nowMs = deps.now();
    const asked = readMend(query, {
      department,
      clock: { date: siteDate(nowMs, department.zone), minute: siteMinute(nowMs, department.zone) },
      booking,
    });
    const listed = await store.bookings.listDay(asked.day);
    const bookings =
      booking === undefined || listed.some((b) => b.id === booking.id)
        ? listed
        : [...listed, booking];
    const requests = new Map((await store.requests.list()).map((r) => [r.id, r]));
    const problems: Problem[] = [...asked.problems];
    const made = await proposed();
    // Offers are kept by the planner: while the form is filled in, they are worked out.
    if (asked.what !== undefined && made === undefined)
      lookAhead(deps, asked.days, requests).catch(() => deps.log('looking ahead failed'));
    const joint = Number(query['done'] ?? 'x');
    const examOf = (id: string) => examName(requests.get(id)?.body.examId ?? '');
    const done = Number.isInteger(joint)
      ? mendDone(await store.history.since(joint), joint, department, asked.day, examOf)
      : undefined;
    const speakIds = done !== undefined ? String(query['speak'] ?? '').split(',') : [];
    const speak = (await store.bookings.listDay(asked.day))
      .filter((b) => speakIds.includes(b.requestId))
      .map((b) => ({
        requestId: b.requestId,
        exam: examOf(b.requestId),
        words: [`Booked at ${placeWords(b, department, asked.day)}.`],
      }));
    response
      .status(message?.kind === 'refused' ? 409 : problems.length > 0 ? 422 : 200)
      .render('mend', {
        title: 'Mend a day',
        form: mendForm({ asked, department, bookings, requests, examName }),
        address: request.originalUrl,
        problems,
        ...{ done, speak },
        down: asked.what === 'down' || asked.what === 'staff',
        views:
          made === undefined || asked.what === 'no-show'
            ? []
            : mendViews(made, requests, examName, asked.day),
        stuck: made?.outcome.proposals[0]?.stuck.map((s) => s.requestId) ?? [],
        freed: made === undefined ? undefined : freedOf(made, booking),
        message: message ?? takeTold(request, response),
      });

    async function proposed(): Promise<MendProposal | undefined> {
      if (asked.event === undefined) return undefined;
      const subject = befallsPatient(asked.what) ? booking : undefined;
      try {
        const full = asked as MendAsked & { readonly event: AskedEvent };
        return await proposeMend(deps, full, requests, subject);
      } catch (error) {
        if (!(error instanceof ProblemError)) throw error;
        problems.push(error.problem);
        return undefined;
      }
    }

    /** What falls free when somebody did not come, and who could have it. */
    function freedOf({ outcome }: MendProposal, gone: StoredBooking | undefined) {
      if (outcome.freed === undefined || gone === undefined) return undefined;
      const { place, couldCome } = outcome.freed;
      return {
        requestId: gone.requestId,
        exam: examOf(gone.requestId),
        place: `${clock(place.startMin)} to ${clock(place.startMin + place.slotMin)} on ${scannerName(place.scannerId, department)}`,
        marked: gone.status === 'noshow',
        value: `${gone.id}|${gone.version}`,
        couldCome: couldCome
          .filter((id) => id !== gone.requestId)
          .map((id) => ({
            requestId: id,
            exam: examOf(id),
            priority: requests.get(id)?.body.priority ?? '',
          })),
      };
    }
  }

  async function markNoShow(value: string, who: string): Promise<string | undefined> {
    const [id = '', version] = value.split('|');
    const marked = await store.bookings.setStatus(id, Number(version), 'noshow', who, deps.now());
    if (marked.kind === 'placed') return undefined;
    return marked.kind === 'taken' ? 'the place is taken' : `${marked.why}.`;
  }

  return router;
}

const refusedTold = (why: string): Told => ({
  kind: 'refused',
  text: `Nothing was changed. ${why} Below is what can be done as things stand now.`,
});

/** The address's fields that are plain text. */
const textsOf = (query: Request['query']): Record<string, string> =>
  Object.fromEntries(
    Object.entries(query).flatMap(([name, value]) =>
      typeof value === 'string' ? [[name, value]] : [],
    ),
  );
