import type { DatabaseKind } from '../database.js';

/**
 * What patients achieved, one row a kind of an exam: only ever added to. `counted_exam` makes sure that no exam is
 * counted twice; nothing leads from there to its rows, which carry a chance number of their own. So the rows can be
 * handed on, and say of nobody more than a group of patients.
 */
export function achievedTables(kind: DatabaseKind): readonly string[] {
  const whole = kind === 'sqlite' ? 'integer' : 'bigint';
  const seconds = kind === 'sqlite' ? 'real' : 'double precision';
  // Without a row number no order of adding is kept that would put an exam beside its rows.
  const strict = kind === 'sqlite' ? 'strict, without rowid' : '';
  return [
    `create table counted_exam (
      booking_id text not null primary key references booking (id)
    ) ${strict}`,
    `create table achieved (
      id text not null primary key,
      kind text not null check (kind in ('still', 'hold', 'stay', 'entry', 'exam')),
      patient_group text not null check (trim(patient_group) <> ''),
      seconds ${seconds} not null check (seconds >= 0),
      censored ${whole} not null check (censored in (0, 1)),
      stated_s ${seconds} check (stated_s is null or stated_s >= 0),
      said_by text check (said_by in ('patient', 'carer', 'referrer', 'earlier exam')),
      recorded_on text not null check (length(recorded_on) = 10)
    ) ${strict}`,
    ...(kind === 'sqlite' ? sqliteGuards : postgresGuards),
  ];
}

const sqliteGuards = ['achieved', 'counted_exam'].flatMap((table) =>
  ['update', 'delete'].map(
    (verb) => `create trigger ${table}_no_${verb} before ${verb} on ${table}
    begin select raise(abort, 'what was achieved is only added to'); end`,
  ),
);

const postgresGuards = [
  `create function achieved_only_added() returns trigger language plpgsql as
    $$ begin raise exception 'what was achieved is only added to'; end $$`,
  ...['achieved', 'counted_exam'].map(
    (table) => `create trigger ${table}_guard before update or delete on ${table}
    for each row execute function achieved_only_added()`,
  ),
];
