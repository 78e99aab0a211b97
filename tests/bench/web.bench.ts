import { request as httpRequest } from 'node:http';
import { openSite } from '../browser/harness.js';
import { requestFor } from '../planning/ground.js';
import type { BenchCase } from './run.js';

const day = '2026-12-08';

/** One page or fragment of the running application, whole and over a real connection. */
function ask(url: string, form?: Record<string, string>): Promise<string> {
  return new Promise((resolve, reject) => {
    const body = form === undefined ? undefined : new URLSearchParams(form).toString();
    const call = httpRequest(
      url,
      {
        method: body === undefined ? 'GET' : 'POST',
        agent: false,
        headers:
          body === undefined
            ? {}
            : {
                'content-type': 'application/x-www-form-urlencoded',
                'content-length': Buffer.byteLength(body),
              },
      },
      (answer) => {
        let text = '';
        answer.setEncoding('utf8');
        answer.on('data', (part: string) => (text += part));
        answer.on('end', () =>
          answer.statusCode === 200
            ? resolve(text)
            : reject(new Error(`${answer.statusCode} from ${url}`)),
        );
      },
    );
    call.on('error', reject);
    call.end(body);
  });
}

/** Fills the day up to 80 bookings: a fourth of an hour each, wherever the scanners are still free. */
async function fillDay(site: Awaited<ReturnType<typeof openSite>>): Promise<void> {
  let count = (await site.store.bookings.listDay(day)).length;
  for (const scannerId of ['mr1', 'mr2', 'mr3']) {
    for (let startMin = 480; startMin < 1080 && count < 80; startMin += 10) {
      const id = `B-${scannerId}-${startMin}`;
      await site.store.requests.add(requestFor('brain-general', { id }), 'bench', 0);
      const placed = await site.store.bookings.place(
        { requestId: id, scannerId, date: day, startMin, slotMin: 10, teams: [] },
        'bench',
        0,
      );
      if (placed.kind === 'placed') count += 1;
    }
  }
  if (count < 80) throw new Error(`only ${count} bookings fit the day`);
}

export const cases = async (): Promise<BenchCase[]> => {
  const site = await openSite();
  await fillDay(site);
  const exams = [
    'brain-general',
    'liver',
    'knee',
    'spine-lumbar',
    'bile-ducts',
    'brain-tumour-follow-up',
    'prostate',
    'brain-ventricles',
  ];
  let turn = 0;
  // Never the same answers twice: nothing is to come out of what the planner keeps.
  const answers = () => {
    turn += 1;
    return {
      request_id: 'R-999',
      exam: exams[turn % exams.length]!,
      still_for: `${30 + turn} s`,
      hold_breath_for: `${6 + (turn % 12)} s`,
      said_by: 'patient',
      follows_instructions: 'yes',
      contrast: turn % 2 === 0 ? 'approved' : 'undecided',
      slot: '30 min',
    };
  };
  return [
    {
      name: 'plan beside the form, answers never seen before, over HTTP',
      rounds: 40,
      subject: () => ask(`${site.url}/requests/look`, answers()),
      limitMs: 150,
    },
    {
      name: 'day board with 80 bookings over HTTP, against an empty page',
      rounds: 40,
      subject: () => ask(`${site.url}/day/${day}`),
      reference: () => ask(`${site.url}/owed`),
      limitMs: 50,
    },
  ];
};
