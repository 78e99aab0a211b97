import { LineCounter, parseDocument } from 'yaml';
import type { z } from 'zod';
import type { Problem, Result } from '../../shared/index.js';

/** One text file of a library: its path inside the library folder and its text. */
export interface LibraryFile {
  readonly path: string;
  readonly text: string;
}

/** A parsed file that can still say on which line a field stands. */
export interface YamlSource {
  readonly path: string;
  readonly value: unknown;
  lineOf(path: readonly PropertyKey[]): number | undefined;
}

/** Parses YAML 1.2 with merge keys; every syntax fault is reported with its line. */
export function parseYaml(file: LibraryFile): Result<YamlSource> {
  const lines = new LineCounter();
  const document = parseDocument(file.text, {
    merge: true,
    lineCounter: lines,
    prettyErrors: false,
  });
  if (document.errors.length > 0) {
    return {
      kind: 'refused',
      problems: document.errors.map((error) => ({
        code: 'library-syntax',
        thing: `${file.path}, line ${lines.linePos(error.pos[0]).line}`,
        value: error.message,
        limit: 'the file must be valid YAML',
        wayOut: 'Mend that line; indentation counts.',
      })),
    };
  }
  const lineOf = (path: readonly PropertyKey[]): number | undefined => {
    for (let length = path.length; length > 0; length--) {
      const node: unknown = document.getIn(path.slice(0, length), true);
      const range = (node as { range?: [number, number, number] } | undefined)?.range;
      if (range) return lines.linePos(range[0]).line;
    }
    return undefined;
  };
  return { kind: 'ok', value: { path: file.path, value: document.toJS(), lineOf } };
}

/** Turns schema faults into problems that name file, line, entry, field and value. */
export function schemaProblems(
  error: z.ZodError,
  source: YamlSource,
  value: unknown,
  entry: string,
  prefix: readonly PropertyKey[] = [],
): Problem[] {
  return error.issues.map((issue) => {
    const path = [...prefix, ...issue.path];
    const line = source.lineOf(path);
    const field = issue.path.map(String).join('.') || '(the whole entry)';
    return {
      code: 'library-value',
      thing: `${source.path}${line === undefined ? '' : `, line ${line}`}, ${entry}, field ${field}`,
      value: describe(issue.path.reduce<unknown>(stepInto, value)),
      limit: issue.message,
      wayOut: 'Correct the value in the file and load the library again.',
    };
  });
}

const stepInto = (value: unknown, key: PropertyKey): unknown =>
  value !== null && typeof value === 'object'
    ? (value as Record<PropertyKey, unknown>)[key]
    : undefined;

/** A value as a reader would quote it, cut to a line. */
export function describe(value: unknown): string {
  if (value === undefined) return 'missing';
  const text = typeof value === 'string' ? `"${value}"` : JSON.stringify(value);
  return text.length > 80 ? `${text.slice(0, 77)}...` : text;
}
