import { join } from 'node:path';
import { projectFolder } from '../../src/cli/files.js';
import { openDepartment, openGround } from '../../src/cli/ground.js';
import { seedScenarios } from '../../src/web/seed-scenarios.js';
import { openSite, type Site } from '../browser/harness.js';

export type Fields = readonly (readonly [string, string])[];

export interface Progress {
  readonly state: string;
  readonly at: string;
  readonly percent: number;
}

/** The demo department with five scenarios kept, and what a browser does on the month's pages. */
export interface MonthSite extends Site {
  readonly post: (path: string, fields: Fields) => Promise<Response>;
  readonly page: (path: string) => Promise<string>;
  /** Asks for a comparison; the address of its run. */
  readonly compared: (ids: readonly string[]) => Promise<string>;
  /** Looks at a run until it is as wanted. */
  readonly until: (run: string, wanted: (p: Progress) => boolean) => Promise<Progress>;
}

export async function openMonth(options: Parameters<typeof openSite>[0] = {}): Promise<MonthSite> {
  const site = await openSite(options);
  await seedScenarios(join(projectFolder, 'tests/web/month-scenarios.yaml'), {
    store: site.store,
    ground: openGround().ground,
    department: openDepartment(),
    now: () => 0,
  });
  const post = (path: string, fields: Fields) =>
    fetch(site.url + path, {
      method: 'POST',
      body: new URLSearchParams(fields.map((f) => [...f])),
      redirect: 'manual',
    });
  return {
    ...site,
    post,
    page: async (path) => (await fetch(site.url + path)).text(),
    compared: async (ids) => {
      const answer = await post('/month/compare', [
        ...ids.map((id) => ['scenario', id] as const),
        ['against', ids[0]!],
      ]);
      const run = answer.headers.get('location');
      if (answer.status !== 303 || run === null)
        throw new Error(`not compared: ${answer.status} ${await answer.text()}`);
      return run;
    },
    until: async (run, wanted) => {
      for (let i = 0; i < 1200; i++) {
        const progress = (await (await fetch(`${site.url}${run}/progress`)).json()) as Progress;
        if (wanted(progress)) return progress;
        await new Promise((resolve) => setTimeout(resolve, 50));
      }
      throw new Error('the simulation did not get there');
    },
  };
}

/** The fields of a scenario's form as a browser would send them. */
export function fieldsOf(html: string): [string, string][] {
  const form = /<form method="post" action="\/month\/scenarios[^]*?<\/form>/.exec(html)?.[0] ?? '';
  const inputs = [...form.matchAll(/<input([^>]*)>/g)].flatMap(([, tag]) => {
    const name = /name="([^"]*)"/.exec(tag!)?.[1];
    const kind = /type="([^"]*)"/.exec(tag!)?.[1] ?? 'text';
    const value = /value="([^"]*)"/.exec(tag!)?.[1] ?? '';
    if (name === undefined) return [];
    if ((kind === 'radio' || kind === 'checkbox') && !tag!.includes(' checked')) return [];
    return [[name, value] as [string, string]];
  });
  const selects = [...form.matchAll(/<select name="([^"]*)">([^]*?)<\/select>/g)].map(
    ([, name, options]): [string, string] => {
      const chosen = /<option(?: value="([^"]*)")? selected>([^<]*)/.exec(options!);
      return [name!, chosen?.[1] ?? chosen?.[2] ?? ''];
    },
  );
  return [...inputs, ...selects];
}

/** The same fields with some changed. */
export const changed = (
  fields: Fields,
  change: Readonly<Record<string, string>>,
): readonly (readonly [string, string])[] => [
  ...fields.filter(([name]) => !(name in change)),
  ...Object.entries(change),
];

/** A scenario of its own for a story, copied from a kept one in the form. */
export async function made(
  site: MonthSite,
  change: Readonly<Record<string, string>>,
): Promise<string> {
  const fields = fieldsOf(await site.page('/month/new?from=S-3'));
  const answer = await site.post('/month/scenarios', changed(fields, change));
  if (answer.status !== 303) throw new Error(await answer.text());
  return (await site.store.scenarios.list()).at(-1)!.id;
}
