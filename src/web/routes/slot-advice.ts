import { Router } from 'express';
import { ProblemError } from '../../shared/index.js';
import type { PageDeps } from '../deps.js';
import { AdviceRuns, type Advice } from '../month/advice-runs.js';
import type { MonthRuns } from '../month/month-runs.js';
import { demandRecords, monthRecords } from '../month/records.js';
import { slotAdvicePage } from '../view-models/slot-advice-page.js';

/** How long a slot should be, per exam and patient group: for a wished chance, and by the balance of late against idle. */
export function slotAdviceRoutes(deps: PageDeps, runs: MonthRuns): Router {
  const router = Router();
  const advices = new AdviceRuns(runs.desk);

  router.get('/month/slots', async (request, response) => {
    const text = (field: string, otherwise: string) => {
      const value = request.query[field];
      return typeof value === 'string' && value !== '' ? value : otherwise;
    };
    const values = {
      chance: text('chance', '90'),
      late: text('late', '3'),
      idle: text('idle', '1'),
      quick: text('quick', ''),
    };
    const asked = {
      chance: inRange('chance to finish, %', values.chance, 50, 99) / 100,
      lateCost: inRange('cost of a minute late', values.late, 0.01, 1000),
      idleCost: inRange('cost of a minute idle', values.idle, 0.01, 1000),
      quickLooks: values.quick === 'yes',
    };
    const advice = request.query['chance'] === undefined ? undefined : await adviceNow();
    const query = new URLSearchParams(values).toString();
    response.render('slots', {
      title: 'How long should a slot be?',
      values,
      query,
      working: advice?.kind === 'working' ? advice : undefined,
      page:
        advice?.kind === 'rows'
          ? slotAdvicePage(advice.rows, asked, { exam: text('exam', ''), group: text('group', '') })
          : undefined,
    });

    async function adviceNow(): Promise<Advice> {
      const { requests } = await monthRecords(deps);
      demandRecords(requests);
      return advices.get(requests, deps.department.scanners, asked);
    }
  });

  return router;
}

function inRange(what: string, text: string, low: number, high: number): number {
  const value = Number(text.replace(',', '.'));
  if (Number.isFinite(value) && value >= low && value <= high) return value;
  throw new ProblemError({
    code: 'slot-advice',
    thing: what,
    value: `"${text}"`,
    limit: `a number from ${low} to ${high}`,
    wayOut: 'Go back and correct it.',
  });
}
