import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { join } from 'node:path';
import { demoFolder } from '../../src/cli/files.js';
import { openRequests } from '../../src/cli/ground.js';
import { openSite, type Site } from '../browser/harness.js';

const day = '2026-12-08';

/** Hidden fields of the page's first accepting form, as a browser would send them. */
function acceptFields(page: string): [string, string][] {
  const form = /<form method="post" action="\/mend[^"]*">([\s\S]*?)<\/form>/.exec(page)?.[1] ?? '';
  return [...form.matchAll(/<input type="hidden" name="([^"]+)" value="([^"]*)">/g)].map((m) => [
    m[1]!,
    m[2]!,
  ]);
}

const onScanner1 = new Set(['R-103', 'R-111', 'R-112', 'R-113', 'R-117']);

// Over HTTP, part of the demo department. Rules are the issue's own: nobody on the way in moves, nothing moves before it is accepted, all or none.
describe('mending a day over HTTP', () => {
  let site: Site;
  beforeEach(async () => {
    site = await openSite({ seed: false });
    const { requests } = openRequests(join(demoFolder, 'requests.csv'));
    const some = requests.filter(
      ({ request, booking }) =>
        booking === undefined ||
        (booking.date === day && (booking.scannerId === 'mr2' || onScanner1.has(request.id))),
    );
    await site.store.seed(
      {
        requests: some.map((r) => r.request),
        bookings: some.flatMap((r) => (r.booking === undefined ? [] : { ...r.booking, teams: [] })),
      },
      'first start',
      0,
    );
  });
  afterEach(() => site.close());

  const address = (values: Record<string, string>) =>
    `/mend?${new URLSearchParams({ propose: '1', day, today: day, until: '2026-12-09', ...values }).toString()}`;
  const down = address({
    ...{ what: 'down', scanner: 'mr2', from: '10:00', to: '14:00' },
    ...{ now: '10:00', before: '11:00' },
  });
  const look = async (path: string) => (await fetch(site.url + path)).text();
  const post = (path: string, fields: readonly (readonly [string, string])[]) =>
    fetch(site.url + path, {
      method: 'POST',
      body: new URLSearchParams(fields.map(([name, value]) => [name, value])),
      redirect: 'manual',
    });
  const board = async () =>
    (await site.store.bookings.listBetween(day, '2026-12-11')).map(
      (b) => `${b.requestId} ${b.scannerId} ${b.date} ${b.startMin}+${b.slotMin} v${b.version}`,
    );
  const of = async (requestId: string) => (await site.store.bookings.ofRequest(requestId))!;
  const movedIn = (fields: readonly (readonly [string, string])[]) =>
    fields.filter(([name]) => name === 'move').map(([, value]) => value.split('.')[0]!);

  it('proposes, changes nothing by it, moves nobody who starts before the time given, and applies all when accepted', async () => {
    const before = await board();
    const page = await look(down);
    const fields = acceptFields(page);
    expect(await board()).toEqual(before);
    const moved = movedIn(fields);
    expect(moved.length).toBeGreaterThan(1);
    for (const id of moved) expect((await of(id)).startMin).toBeGreaterThanOrEqual(660);
    // On the table or on the way when the scanner fails: named, and left where they are.
    expect(page).toContain('Who must be spoken with');
    expect(fields.filter(([n]) => n === 'speak').map(([, v]) => v)).toEqual(['R-120', 'R-121']);

    const answer = await post(down, fields);
    expect(answer.status).toBe(303);
    for (const [name, value] of fields) {
      if (name !== 'move') continue;
      const [id, version, scannerId, date, start, slot] = value.split('|');
      expect(await site.store.bookings.get(id!)).toMatchObject({
        ...{ scannerId, date, startMin: Number(start), slotMin: Number(slot) },
        version: Number(version) + 1,
      });
      expect((await site.store.bookings.get(id!))?.plan).not.toBeNull();
    }
    for (const b of await site.store.bookings.listDay(day))
      if (b.scannerId === 'mr2' && b.startMin < 840 && b.startMin + b.slotMin > 600)
        expect(['R-120', 'R-121']).toContain(b.requestId);
    // Whom to tell, from what to what; and one undo takes all of it back.
    const told = await look(answer.headers.get('location')!);
    expect(told).toContain('These people must be told');
    for (const id of [...moved, 'R-120', 'R-121']) expect(told).toContain(`/requests/${id}"`);
    await post('/undo', [['date', day]]);
    expect((await board()).map((b) => b.replace(/ v\d+$/, ''))).toEqual(
      before.map((b) => b.replace(/ v\d+$/, '')),
    );
    expect(await look(answer.headers.get('location')!)).toContain('undone since');
  });

  it('refuses the whole when a place was given away meanwhile, and says to whom', async () => {
    const fields = acceptFields(await look(down));
    const elsewhere = fields.map(([, v]) => v.split('|')).find((v) => v[2] === 'mr3')!;
    const [, , scannerId, date, start] = elsewhere as [string, string, string, string, string];
    const place = { scannerId, date, startMin: Number(start), slotMin: 5, teams: [] };
    const taken = await site.store.bookings.place({ requestId: 'R-161', ...place }, 'B', 1);
    expect(taken.kind).toBe('placed');
    const before = await board();
    const answer = await post(down, fields);
    expect(answer.status).toBe(409);
    const page = await answer.text();
    expect(page).toContain('Nothing was changed.');
    expect(page).toContain('by R-161');
    expect(await board()).toEqual(before);
    // The page goes on with a proposal for the day as it is now.
    expect(acceptFields(page).length).toBeGreaterThan(0);
    expect((await post(down, acceptFields(page))).status).toBe(303);
  });

  it('refuses the whole when a booking was changed after it was shown', async () => {
    const fields = acceptFields(await look(down));
    const last = (await of(movedIn(fields).at(-1)!))!;
    await site.store.bookings.setStatus(last.id, last.version, 'arrived', 'other desk', 1);
    const before = await board();
    const answer = await post(down, fields);
    expect(answer.status).toBe(409);
    expect(await answer.text()).toContain('Somebody changed one of these bookings');
    expect(await board()).toEqual(before);
  });

  it('refuses the whole for closed hours, unreadable places and those at the scanner by now', async () => {
    const fields = acceptFields(await look(down));
    const before = await board();
    const n = fields.findIndex(([name]) => name === 'move');
    const instead = (change: (parts: string[]) => string[]) =>
      fields.map(([name, value], at) =>
        at === n ? ([name, change(value.split('|')).join('|')] as const) : ([name, value] as const),
      );
    for (const wrong of [
      instead((p) => [p[0]!, p[1]!, p[2]!, p[3]!, '300', p[5]!]),
      instead((p) => [p[0]!, p[1]!, 'mr9', p[3]!, p[4]!, p[5]!]),
      instead((p) => [p[0]!, p[1]!, p[2]!, '2026-02-30', p[4]!, p[5]!]),
      instead((p) => [p[0]!, 'x']),
      instead(() => ['']),
      [],
    ]) {
      const answer = await post(down, wrong);
      expect(answer.status).toBe(409);
      expect(await answer.text()).toContain('Nothing was changed.');
      expect(await board()).toEqual(before);
    }
    const first = await of(movedIn(fields)[0]!);
    const tap = { tapId: 'tap-0001', atS: 0, happening: { kind: 'entered' } } as const;
    await site.store.consoleLog.append(first.id, [tap], 'technologist', 1);
    const answer = await post(down, fields);
    expect(answer.status).toBe(409);
    expect(await answer.text()).toContain('is at the scanner by now');
    expect(await board()).toEqual(before);
  });

  it('never moves who has arrived or is tapped in at the scanner, however late they start', async () => {
    const [one, two] = movedIn(acceptFields(await look(down)));
    const arrived = await of(one!);
    const tapped = await of(two!);
    await site.store.bookings.setStatus(arrived.id, arrived.version, 'arrived', 'desk', 1);
    const tap = { tapId: 'tap-0001', atS: 0, happening: { kind: 'entered' } } as const;
    await site.store.consoleLog.append(tapped.id, [tap], 'technologist', 1);
    const fields = acceptFields(await look(down));
    expect(movedIn(fields)).not.toContain(one);
    expect(movedIn(fields)).not.toContain(two);
    const spoken = fields.filter(([n]) => n === 'speak').map(([, v]) => v);
    expect(spoken).toEqual(expect.arrayContaining([one, two]));
  });

  it('a late patient begins late, and an exam that runs over keeps its scanner for longer', async () => {
    const late = address({
      ...{ what: 'late', booking: 'R-103.1', minutes: '30', now: '09:50', before: '10:50' },
    });
    expect((await post(late, acceptFields(await look(late)))).status).toBe(303);
    expect((await of('R-103')).startMin).toBeGreaterThanOrEqual(630);
    const over = address({
      ...{ what: 'overrun', booking: 'R-111.1', minutes: '20', now: '11:15', before: '12:15' },
    });
    const was = await of('R-111');
    const page = await look(over);
    expect(page).toContain('must wait');
    expect((await post(over, acceptFields(page))).status).toBe(303);
    expect(await of('R-111')).toMatchObject({ startMin: was.startMin, slotMin: was.slotMin + 20 });
  });

  it('an emergency gets a place today, whatever its request was written as', async () => {
    const path = address({ what: 'emergency', request: 'R-165', now: '10:05', before: '11:05' });
    const answer = await post(path, acceptFields(await look(path)));
    expect(answer.status).toBe(303);
    expect(await of('R-165')).toMatchObject({ date: day, status: 'booked' });
    expect((await of('R-165')).startMin).toBeGreaterThanOrEqual(605);
  });

  it('marks who did not come, and names those waiting who could come, with a way to place them', async () => {
    const path = address({ what: 'no-show', booking: 'R-117.1', now: '16:15', before: '16:20' });
    const page = await look(path);
    expect(acceptFields(page)).toEqual([['noshow', 'R-117.1|1']]);
    expect(page).toContain('/requests/R-157/places');
    const answer = await post(path, acceptFields(page));
    expect(answer.status).toBe(303);
    expect(await site.store.bookings.get('R-117.1')).toMatchObject({ status: 'noshow' });
    expect((await site.store.requests.get('R-117'))?.status).toBe('waiting');
    const after = await look(answer.headers.get('location')!);
    expect(after).toContain('/requests/R-157/places');
    expect(acceptFields(after)).toEqual([]);
    expect((await post(path, [['noshow', 'R-117.1|1']])).status).toBe(409);
  });

  it('says of a done, cancelled or arrived patient that this cannot be, and of an unreadable address what is wrong', async () => {
    const one = await of('R-103');
    await site.store.bookings.setStatus(one.id, one.version, 'arrived', 'desk', 1);
    const other = await of('R-111');
    await site.store.bookings.cancel(other.id, other.version, 'desk', 1);
    for (const [values, words] of [
      [{ what: 'no-show', booking: 'R-103.1' }, 'is here already'],
      [{ what: 'late', booking: 'R-111.1', minutes: '20' }, 'is off the board'],
      [{ what: 'late', booking: 'R-112.1', minutes: '-3' }, 'whole minutes'],
      [{ what: 'late', booking: 'nobody' }, 'a booking must be chosen'],
      [{ what: 'down', scanner: 'mr9', from: '09:00', to: '10:00' }, 'not one of ours'],
      [{ what: 'down', scanner: 'mr1', from: 'ten', to: '11:00' }, 'a 24-hour time'],
      [{ what: 'down', scanner: 'mr1', from: '10:00', to: '09:00' }, 'it must be after'],
      [{ what: 'emergency', request: 'R-101' }, 'R-101'],
      [{ what: 'team' }, 'a team must be chosen'],
      [{ what: 'down', day: '2026-11-01', scanner: 'mr1' }, 'that is not over'],
    ] as const) {
      const answer = await fetch(site.url + address(values));
      expect(answer.status, words).toBe(422);
      expect(await answer.text()).toContain(words);
    }
    for (const odd of [
      '/mend',
      '/mend?what=flood',
      '/mend?what=down&what=late&day=x',
      '/mend?done=7',
    ])
      expect((await fetch(site.url + odd)).status, odd).toBe(200);
  });
});
