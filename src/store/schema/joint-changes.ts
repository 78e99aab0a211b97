import type { DatabaseKind } from '../database.js';

/** Several bookings changed in one go: their lines of history carry one number, and are undone together. */
export function jointChanges(kind: DatabaseKind): readonly string[] {
  const whole = kind === 'sqlite' ? 'integer' : 'bigint';
  return [
    `alter table change add column joint ${whole}`,
    `create index change_joint on change (joint)`,
  ];
}
