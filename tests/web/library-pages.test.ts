import { decode } from 'fast-png';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openSite, type Site } from '../browser/harness.js';
import { shipped } from '../planning/ground.js';

// Pages over the shipped library; they hold for any library that loads.
describe('library, policy and methods', () => {
  let site: Site;
  beforeAll(async () => {
    site = await openSite({ seed: false });
  });
  afterAll(() => site.close());
  const page = async (path: string) => {
    const answer = await fetch(site.url + path);
    return { status: answer.status, text: answer.status === 200 ? await answer.text() : '' };
  };

  it('every exam and every sequence at both fields has its page', async () => {
    for (const id of shipped.exams.keys())
      expect((await page(`/library/exams/${id}`)).status, id).toBe(200);
    for (const [id, fields] of shipped.sequences) {
      for (const fieldT of fields.keys())
        expect((await page(`/library/sequences/${id}?field=${fieldT}`)).status, id).toBe(200);
    }
  });

  it('a low rule never stands without its words', async () => {
    for (const path of ['/policy', '/library/exams/brain-general', '/methods']) {
      const words = (await page(path)).text.replace(/<[^>]+>/g, ' ').replace(/\s+/g, ' ');
      const said = words.match(/screening-grade/g)?.length ?? 0;
      expect(said, path).toBeGreaterThan(0);
      expect(
        words.match(/screening-grade, not diagnostic/g)?.length ?? 0,
        path,
      ).toBeGreaterThanOrEqual(said);
    }
  });

  it('every figure of exposure defers to the scanner and the label', async () => {
    const { text } = await page('/library/sequences/head-ax-t2-ss-half?field=3');
    expect(text).toMatch(/B1\+rms about [\d.]+ microtesla.*scanner's own|scanner&#39;s own/s);
    expect(text).toContain('Simulated phantom, not a patient');
  });

  it('pictures are computed: a blurred single-shot is not the full-quality picture, a moved one neither', async () => {
    const grey = async (path: string) => {
      const answer = await fetch(site.url + path);
      expect(answer.headers.get('content-type')).toBe('image/png');
      return decode(new Uint8Array(await answer.arrayBuffer()));
    };
    const base = '/library/sequences';
    const full = await grey(`${base}/head-ax-t2-fse/picture.png?field=3`);
    const single = await grey(`${base}/head-ax-t2-ss-half/picture.png?field=3`);
    const moved = await grey(`${base}/head-ax-t2-fse/picture.png?field=3&moved=1`);
    expect([full.width, full.height]).toEqual([240, 240]);
    const difference = (a: typeof full, b: typeof full) => {
      let sum = 0;
      for (let i = 0; i < a.data.length; i++)
        sum += Math.abs(Number(a.data[i]) - Number(b.data[i]));
      return sum / a.data.length;
    };
    expect(difference(full, single)).toBeGreaterThan(2);
    expect(difference(full, moved)).toBeGreaterThan(2);
    // The middle of a ventricle is the brightest part of a T2 picture; outside the head there is next to nothing.
    expect(Number(full.data[120 * 240 + 106])).toBeGreaterThan(180);
    expect(Number(full.data[5 * 240 + 5])).toBeLessThan(30);
  });

  it('what is not there is a page that says so', async () => {
    for (const path of [
      '/library/exams/elbow',
      '/library/sequences/none',
      '/library/sequences/head-ax-dwi/picture.png?field=3',
    ]) {
      expect((await page(path)).status, path).toBe(404);
    }
  });
});
