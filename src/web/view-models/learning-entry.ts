import type { LearnedKind } from '../../exams/index.js';

/**
 * The entry that switches an estimate on, as it is pasted below `learning: entries:` of policy.yaml. Who signs fills in the
 * name; with an empty one the policy does not load, so that nothing is switched on unsigned.
 */
export function entryYaml(entry: {
  readonly group: string;
  readonly kind: LearnedKind;
  /** ISO date of today. */
  readonly signedOn: string;
  readonly because: string;
  readonly readAtS?: number;
  readonly readAtShare?: number;
}): string {
  const { group, kind, signedOn, because, readAtS, readAtShare } = entry;
  return [
    `    - group: ${JSON.stringify(group)}`,
    `      kind: ${kind}`,
    ...(readAtS === undefined ? [] : [`      readAtS: ${readAtS}`]),
    ...(readAtShare === undefined ? [] : [`      readAtShare: ${readAtShare}`]),
    '      signedBy: ""',
    `      signedOn: "${signedOn}"`,
    `      because: ${JSON.stringify(because)}`,
  ].join('\n');
}
