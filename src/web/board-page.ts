import type { Request, Response } from 'express';
import { clock } from '../day/index.js';
import type { StoredBooking } from '../store/index.js';
import { gone, readGap } from './board-fields.js';
import type { PageDeps } from './deps.js';
import { notBefore, siteNow } from './past-places.js';
import { recordedAnswers } from './recorded-answers.js';
import { dayFrom, isDay } from './site-time.js';
import { takeTold, type Told } from './told.js';
import { dayBoard } from './view-models/day-board.js';
import { gapOffers } from './view-models/gap-offers.js';

/** The day board as a page, shown by itself or with the answer to a change. */
export function boardPage(deps: PageDeps) {
  const { planner } = deps;
  const examName = (id: string) => deps.ground.library.exams.get(id)?.name ?? id;

  async function data(date: string) {
    const bookings = await deps.store.bookings.listDay(date);
    const requests = new Map((await deps.store.requests.list()).map((r) => [r.id, r]));
    const today = bookings.flatMap((b) => requests.get(b.requestId) ?? []);
    const board = dayBoard({
      date,
      department: deps.department,
      bookings,
      requests,
      examName,
      recorded: await recordedAnswers(deps, today),
      wishedChance: deps.ground.library.policy.time.finishConfidence.value,
    });
    return { board, bookings, requests };
  }

  async function show(request: Request, response: Response, message?: Told) {
    const date = String(request.params['date']);
    if (!isDay(date)) throw gone('day', date);
    const { board, bookings, requests } = await data(date);
    const opened =
      typeof request.query['booking'] === 'string'
        ? bookings.find((b) => b.id === request.query['booking'])
        : undefined;
    const gap = ahead(date, readGap(request.query['gap'], deps.department.scanners));
    const waiting = [...requests.values()].filter((r) => r.status === 'waiting');
    const offers =
      gap === undefined ? undefined : await gapOffers({ ...gap, date, waiting, planner, examName });
    return response.status(message?.kind === 'refused' ? 409 : 200).render('day', {
      title: `Day board, ${date}`,
      board,
      days: deps.department.days,
      dayBefore: dayFrom(date, -1),
      dayAfter: dayFrom(date, 1),
      scanners: deps.department.scanners,
      waitingCount: waiting.length,
      gap:
        gap === undefined
          ? undefined
          : { ...gap, from: clock(gap.gap.fromMin), to: clock(gap.gap.toMin) },
      offers,
      opened:
        opened === undefined
          ? undefined
          : openedBooking(
              opened,
              examName(requests.get(opened.requestId)?.body.examId ?? ''),
              board,
            ),
      message: message ?? takeTold(request, response),
    });
  }

  /** A gap of today, as far as it has not gone by; one that is over stays whole, for what is written down afterwards. */
  function ahead(date: string, open: ReturnType<typeof readGap>): ReturnType<typeof readGap> {
    const now = siteNow(deps);
    if (open === undefined || date !== now.date) return open;
    const fromMin = notBefore(open.gap.fromMin, now.minute);
    return fromMin >= open.gap.toMin ? open : { ...open, gap: { ...open.gap, fromMin } };
  }

  return { data, show };
}

function openedBooking(booking: StoredBooking, exam: string, board: ReturnType<typeof dayBoard>) {
  const block = board.columns.flatMap((c) => c.blocks).find((b) => b.bookingId === booking.id);
  return {
    ...booking,
    exam,
    start: clock(booking.startMin),
    end: clock(booking.startMin + booking.slotMin),
    block,
  };
}
