import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { mostScenarios } from '../../src/store/scenarios.js';
import { changed, fieldsOf, made, openMonth, type MonthSite } from './month-site.js';

describe('writing in a scenario', () => {
  let site: MonthSite;
  beforeAll(async () => {
    site = await openMonth();
  });
  afterAll(() => site.close());

  it('two write in one scenario: the second is told and loses nothing', async () => {
    const id = await made(site, { name: 'Ours' });
    const [mine, theirs] = await Promise.all(
      [1, 2].map(async () => fieldsOf(await site.page(`/month/scenarios/${id}`))),
    );
    expect(
      (await site.post(`/month/scenarios/${id}`, changed(theirs!, { name: 'Theirs' }))).status,
    ).toBe(303);
    const refused = await site.post(
      `/month/scenarios/${id}`,
      changed(mine!, { name: 'Mine', requestsPerDay: '77' }),
    );
    expect(refused.status).toBe(422);
    const html = await refused.text();
    expect(html).toContain('it is called &#34;Theirs&#34; now');
    expect(html).toContain('value="Mine"');
    expect(html).toContain('value="77"');
    expect((await site.store.scenarios.get(id))?.scenario.name).toBe('Theirs');
    // Saving once more puts it in the place of theirs.
    expect((await site.post(`/month/scenarios/${id}`, fieldsOf(html))).status).toBe(303);
    expect((await site.store.scenarios.get(id))?.scenario).toMatchObject({
      name: 'Mine',
      requestsPerDay: 77,
    });
  });

  it('the button pressed twice saves once and complains about nothing', async () => {
    const id = await made(site, { name: 'Twice' });
    const fields = changed(fieldsOf(await site.page(`/month/scenarios/${id}`)), { bufferMin: '3' });
    for (let n = 0; n < 2; n++)
      expect((await site.post(`/month/scenarios/${id}`, fields)).status).toBe(303);
    expect((await site.store.scenarios.get(id))?.version).toBe(2);
  });

  it('a scenario taken out while it is written in can be kept as a new one', async () => {
    const id = await made(site, { name: 'Gone' });
    const fields = changed(fieldsOf(await site.page(`/month/scenarios/${id}`)), { name: 'Kept' });
    expect((await site.post(`/month/scenarios/${id}/remove`, [['version', '1']])).status).toBe(303);
    const refused = await site.post(`/month/scenarios/${id}`, fields);
    expect(refused.status).toBe(422);
    const html = await refused.text();
    expect(html).toContain('took this scenario out');
    expect((await site.post('/month/scenarios', fieldsOf(html))).status).toBe(303);
    expect((await site.store.scenarios.list()).at(-1)?.scenario.name).toBe('Kept');
  });

  it.each([
    ['a scenario', { name: 'x'.repeat(5000) }, '5000 characters'],
    ['a team', { 'team 0 name': 'x'.repeat(61), 'team 0 count': '1' }, 'at most 60 characters'],
    ['a team without a name', { 'team 0 name': '', 'team 0 count': '2' }, 'a team has a name'],
  ])(
    'a name too long or missing is refused and what was typed stays: %s',
    async (_, change, word) => {
      const fields = changed(fieldsOf(await site.page('/month/new')), {
        bufferMin: '7',
        ...change,
      });
      const answer = await site.post('/month/scenarios', fields);
      expect(answer.status).toBe(422);
      const html = await answer.text();
      expect(html).toContain(word);
      expect(html).toContain('name="bufferMin" value="7"');
      expect((await fetch(`${site.url}/month`)).status).toBe(200);
    },
  );

  it('a form larger than any page sends is refused in words', async () => {
    const answer = await site.post('/month/scenarios', [['name', 'x'.repeat(200_000)]]);
    expect(answer.status).toBe(413);
    expect(await answer.text()).toContain('the request could not be read');
  });

  it('a scanner that the department no longer has stays in its scenario', async () => {
    const { scenario } = (await site.store.scenarios.get('S-1'))!;
    const old = { ...scenario.scanners[0]!, id: 'old', name: 'The old one' };
    const kept = { ...scenario, name: 'As it was', scanners: [...scenario.scanners, old] };
    const added = await site.store.scenarios.add(kept, 't', 0);
    const id = added.kind === 'saved' ? added.stored.id : '';
    const fields = fieldsOf(await site.page(`/month/scenarios/${id}`));
    expect(
      (await site.post(`/month/scenarios/${id}`, changed(fields, { bufferMin: '5' }))).status,
    ).toBe(303);
    expect((await site.store.scenarios.get(id))?.scenario).toEqual({ ...kept, bufferMin: 5 });
    const copied = fieldsOf(await site.page(`/month/new?from=${id}`));
    expect((await site.post('/month/scenarios', copied)).status).toBe(303);
    expect((await site.store.scenarios.list()).at(-1)?.scenario.scanners).toEqual(kept.scanners);
  });

  it('when no more are kept, what was written stays in the form', async () => {
    const { scenario } = (await site.store.scenarios.get('S-1'))!;
    while ((await site.store.scenarios.list()).length < mostScenarios)
      await site.store.scenarios.add(scenario, 't', 0);
    const fields = changed(fieldsOf(await site.page('/month/new')), { name: 'One too many' });
    const answer = await site.post('/month/scenarios', fields);
    expect(answer.status).toBe(422);
    const html = await answer.text();
    expect(html).toContain('take one out first');
    expect(html).toContain('value="One too many"');
  });
});
