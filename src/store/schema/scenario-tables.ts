import type { DatabaseKind } from '../database.js';

/** Scenarios a manager keeps: a department described, and the policy it would run. No patient stands in them. */
export function scenarioTables(kind: DatabaseKind): readonly string[] {
  const whole = kind === 'sqlite' ? 'integer' : 'bigint';
  const strict = kind === 'sqlite' ? 'strict' : '';
  return [
    `create table scenario (
      id text not null primary key,
      place ${whole} not null unique,
      body text not null,
      version ${whole} not null check (version >= 1)
    ) ${strict}`,
  ];
}
