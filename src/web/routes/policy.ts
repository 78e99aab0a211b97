import { Router } from 'express';
import { gradeWords, grades } from '../../exams/index.js';
import type { WebDeps } from '../deps.js';

/** One value of the policy, wherever it stands in it. */
interface PolicyRow {
  readonly path: string;
  readonly value: string;
  readonly basis: string;
  readonly source: string;
}

/** The site policy in the open: every value with basis and source, every signed entry with who and when. */
export function policyRoutes(deps: WebDeps): Router {
  const router = Router();
  router.get('/policy', (_request, response) => {
    const { policy } = deps.ground.library;
    response.render('policy', {
      title: 'Site policy',
      policy,
      entries: policy.catalogue.entries.map((e) => ({ ...e, words: gradeWords[e.atMost] })),
      rows: rowsOf(policy, ''),
    });
  });
  return router;
}

/** Every leaf that has a value, a basis and a source, with its path in words. */
function rowsOf(node: unknown, path: string): readonly PolicyRow[] {
  if (node === null || typeof node !== 'object') return [];
  if (Array.isArray(node)) return node.flatMap((item, n) => rowsOf(item, `${path} ${n + 1}`));
  const own = node as Record<string, unknown>;
  const rows: PolicyRow[] = [];
  if ('value' in own && 'basis' in own && 'source' in own) {
    rows.push({
      path: path.trim(),
      value: valueWords(own['value']),
      basis: String(own['basis']),
      source: String(own['source']),
    });
  }
  for (const [key, value] of Object.entries(own)) {
    if (key === 'value' || key === 'entries') continue;
    rows.push(...rowsOf(value, `${path} ${key.replace(/([A-Z])/g, (c) => ` ${c.toLowerCase()}`)}`));
  }
  return rows;
}

function valueWords(value: unknown): string {
  const grade = grades.find((g) => g === value);
  if (grade !== undefined) return gradeWords[grade];
  if (value === null || typeof value !== 'object') return String(value);
  return Object.entries(value)
    .map(([k, v]) => `${k} ${String(v)}`)
    .join(', ');
}
