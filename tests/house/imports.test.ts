import { readdirSync, readFileSync, statSync } from 'node:fs';
import { dirname, join, normalize, relative } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

const root = fileURLToPath(new URL('../../', import.meta.url));
const source = join(root, 'src');

/** Rooms in the order the work flows; a room may import the ones before it. */
const downhill = ['shared', 'physics', 'sequences', 'exams', 'tolerance', 'planning'];
const allowed: Record<string, readonly string[]> = {
  ...Object.fromEntries(downhill.map((room, n) => [room, downhill.slice(0, n)])),
  day: downhill,
  console: downhill,
  throughput: [...downhill, 'day', 'console'],
  interchange: [...downhill, 'day', 'console', 'throughput'],
  store: [...downhill, 'day', 'console', 'throughput', 'interchange'],
  cli: [...downhill, 'day', 'console', 'throughput', 'interchange', 'store'],
  web: [...downhill, 'day', 'console', 'throughput', 'interchange', 'store', 'cli'],
};
const pure = [...downhill, 'day', 'console', 'throughput'];
/** The named exceptions: solver adapters run workers by wall clock, months are simulated in threads. */
const mayBeImpure = (path: string) =>
  path.startsWith('planning/solver/') || path.startsWith('throughput/pool/');

function filesBelow(folder: string): string[] {
  return readdirSync(folder).flatMap((name) => {
    const path = join(folder, name);
    if (statSync(path).isDirectory()) return filesBelow(path);
    return /\.(ts|mjs)$/.test(name) ? [path] : [];
  });
}

const files = filesBelow(source).map((path) => {
  const text = readFileSync(path, 'utf8');
  const at = relative(source, path);
  const imports = [...text.matchAll(/(?:from|import)\s*\(?\s*'([^']+)'/g)].map((m) => m[1] ?? '');
  return { at, room: at.includes('/') ? (at.split('/')[0] ?? '') : '', text, imports, path };
});

describe('imports run downhill only', () => {
  it('finds the rooms it is meant to watch', () => {
    expect(files.length).toBeGreaterThan(40);
    for (const room of downhill) expect(files.some((f) => f.room === room)).toBe(true);
  });

  it('no room imports one that stands above it', () => {
    const uphill = files.flatMap(({ at, room, imports, path }) =>
      room === ''
        ? []
        : imports
            .filter((i) => i.startsWith('.'))
            .map((i) => relative(source, normalize(join(dirname(path), i))))
            .filter((to) => {
              const target = to.split('/')[0] ?? '';
              return target !== room && !(allowed[room] ?? []).includes(target);
            })
            .map((to) => `${at} imports ${to}`),
    );
    expect(uphill).toEqual([]);
  });

  it('other rooms are entered by their public face, index', () => {
    const sideDoors = files.flatMap(({ at, room, imports, path }) =>
      !pure.includes(room)
        ? []
        : imports
            .filter((i) => i.startsWith('.'))
            .map((i) => relative(source, normalize(join(dirname(path), i))))
            .filter((to) => to.split('/')[0] !== room && !to.endsWith('/index.js'))
            .map((to) => `${at} imports ${to}`),
    );
    expect(sideDoors).toEqual([]);
  });

  it('the heart has no clock, chance, environment, files or network of its own', () => {
    const impure = files
      .filter((f) => pure.includes(f.room) && !mayBeImpure(f.at))
      .flatMap(({ at, text, imports }) => [
        ...imports
          .filter((i) => !i.startsWith('.') && i !== 'fft.js' && !i.startsWith('pure-rand/'))
          .map((i) => `${at} imports ${i}`),
        ...[...text.matchAll(/Math\.random|Date\.now|new Date\(|process\.|fetch\(/g)].map(
          (m) => `${at} uses ${m[0]}`,
        ),
      ]);
    expect(impure).toEqual([]);
  });

  it('only the composition reads the environment', () => {
    const readers = files.filter((f) => f.text.includes('process.env') && f.at !== 'main.ts');
    expect(readers.map((f) => f.at)).toEqual([]);
  });
});
