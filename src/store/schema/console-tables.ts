import type { DatabaseKind } from '../database.js';

/**
 * The log of what was tapped at the scanner: only ever added to. A tap has an id of its own, made where
 * it was tapped, so that one sent twice after a lost connection is kept once.
 */
export function consoleTables(kind: DatabaseKind): readonly string[] {
  const whole = kind === 'sqlite' ? 'integer' : 'bigint';
  const seconds = kind === 'sqlite' ? 'real' : 'double precision';
  const strict = kind === 'sqlite' ? 'strict' : '';
  return [
    `create table console_tap (
      booking_id text not null references booking (id),
      seq ${whole} not null check (seq >= 1),
      tap_id text not null check (length(tap_id) between 8 and 64),
      at_s ${seconds} not null,
      at_ms ${whole} not null,
      who text not null check (trim(who) <> ''),
      body text not null,
      primary key (booking_id, seq),
      unique (booking_id, tap_id)
    ) ${strict}`,
    ...(kind === 'sqlite' ? sqliteGuards : postgresGuards),
  ];
}

const sqliteGuards = ['update', 'delete'].map(
  (verb) => `create trigger console_tap_no_${verb} before ${verb} on console_tap
    begin select raise(abort, 'the console log is only added to'); end`,
);

const postgresGuards = [
  `create function console_tap_only_added() returns trigger language plpgsql as
    $$ begin raise exception 'the console log is only added to'; end $$`,
  `create trigger console_tap_guard before update or delete on console_tap
    for each row execute function console_tap_only_added()`,
];
