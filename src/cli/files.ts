import { readdirSync, readFileSync, statSync } from 'node:fs';
import { join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';
import { ProblemError } from '../shared/index.js';
import type { LibraryFile } from '../interchange/index.js';

/** The project folder, two above this file both in src and in dist. */
export const projectFolder = fileURLToPath(new URL('../../', import.meta.url));
export const shippedLibraryFolder = join(projectFolder, 'src/exams/library');
export const demoFolder = join(projectFolder, 'data-demo');

/** A text file (`-`: standard input), or a problem that names it and says what to do. */
export function readText(path: string): string {
  try {
    return readFileSync(path === '-' ? 0 : path, 'utf8');
  } catch (error) {
    throw new ProblemError({
      code: 'file-unreadable',
      thing: `file ${path}`,
      value: (error as Error).message,
      limit: 'the file must exist and be readable',
      wayOut: 'Check the path.',
    });
  }
}

/** Every YAML file below a folder, paths relative to it, in a fixed order. */
export function readLibraryFiles(folder: string): LibraryFile[] {
  const walk = (at: string): string[] => {
    try {
      return readdirSync(at)
        .sort()
        .flatMap((name) => {
          const path = join(at, name);
          return statSync(path).isDirectory() ? walk(path) : /\.ya?ml$/.test(name) ? [path] : [];
        });
    } catch (error) {
      throw new ProblemError({
        code: 'library-unreadable',
        thing: `library folder ${at}`,
        value: (error as Error).message,
        limit: 'a folder with policy.yaml, exams/ and sequences/',
        wayOut: 'Check the path given with --library.',
      });
    }
  };
  return walk(folder).map((path) => ({
    path: relative(folder, path).replaceAll('\\', '/'),
    text: readText(path),
  }));
}
