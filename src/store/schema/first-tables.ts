import type { DatabaseKind } from '../database.js';

/**
 * Requests, bookings with their claims, answers owed, history. The rules that must never break stand
 * here as keys and checks, so that no program with a connection can break them.
 */
export function firstTables(kind: DatabaseKind): readonly string[] {
  const whole = kind === 'sqlite' ? 'integer' : 'bigint';
  const counted =
    kind === 'sqlite'
      ? 'integer primary key autoincrement'
      : 'bigint generated always as identity primary key';
  const strict = kind === 'sqlite' ? 'strict' : '';
  return [
    `create table request (
      id text not null primary key check (id <> ''),
      status text not null check (status in ('waiting', 'booked', 'done', 'cancelled')),
      body text not null,
      version ${whole} not null check (version >= 1),
      created_ms ${whole} not null,
      updated_ms ${whole} not null
    ) ${strict}`,

    `create table booking (
      id text not null primary key,
      request_id text not null references request (id),
      scanner_id text not null check (scanner_id <> ''),
      date text not null check (length(date) = 10),
      start_min ${whole} not null check (start_min between 0 and 1439),
      slot_min ${whole} not null check (slot_min between 1 and 1440),
      teams text not null,
      status text not null
        check (status in ('booked', 'arrived', 'fulfilled', 'cancelled', 'noshow')),
      plan text,
      version ${whole} not null check (version >= 1)
    ) ${strict}`,
    // A request has one place at most; a cancelled or missed one does not count.
    `create unique index booking_live on booking (request_id)
      where status in ('booked', 'arrived', 'fulfilled')`,
    `create index booking_date on booking (date, start_min)`,

    // One row per five minutes of each booked resource: its key is what makes double booking impossible.
    `create table claim (
      resource text not null,
      tick ${whole} not null,
      booking_id text not null references booking (id),
      primary key (resource, tick)
    ) ${strict}`,
    `create index claim_booking on claim (booking_id)`,

    `create table change (
      seq ${counted},
      at_ms ${whole} not null,
      who text not null check (trim(who) <> ''),
      what text not null,
      thing_id text not null,
      action text not null,
      before text,
      after text,
      undoes ${whole} unique references change (seq)
    ) ${strict}`,
    `create index change_thing on change (what, thing_id, seq)`,

    `create table done_answer (
      request_id text not null references request (id),
      question_id text not null,
      grade text not null check (grade in ('none', 'screening', 'targeted', 'diagnostic')),
      at_ms ${whole} not null,
      primary key (request_id, question_id),
      unique (request_id, question_id, grade)
    ) ${strict}`,

    // Leaves the list only with a diagnostic answer that is on record, or signed off by name and reason.
    `create table owed (
      id text not null primary key,
      request_id text not null references request (id),
      question_id text not null,
      question_name text not null,
      grade text not null check (grade in ('none', 'screening', 'targeted')),
      due_date text not null check (length(due_date) = 10),
      state text not null
        check (state in ('owed', 'follow-up booked', 'answered', 'signed off')),
      follow_up_request_id text references request (id)
        check (follow_up_request_id is null or follow_up_request_id <> request_id),
      answered_by_request_id text,
      answered_grade text check (answered_grade is null or answered_grade = 'diagnostic'),
      signed_by text,
      signed_reason text,
      version ${whole} not null check (version >= 1),
      unique (request_id, question_id),
      foreign key (request_id, question_id) references done_answer (request_id, question_id),
      foreign key (answered_by_request_id, question_id, answered_grade)
        references done_answer (request_id, question_id, grade),
      constraint follow_up_is_named
        check (state <> 'follow-up booked' or follow_up_request_id is not null),
      constraint answer_is_on_record
        check ((state = 'answered') = (answered_by_request_id is not null)
          and (state = 'answered') = (answered_grade is not null)),
      constraint sign_off_has_name_and_reason
        check ((state = 'signed off') = (signed_by is not null)
          and (state = 'signed off') = (signed_reason is not null)
          and (signed_by is null or trim(signed_by) <> '')
          and (signed_reason is null or trim(signed_reason) <> ''))
    ) ${strict}`,
    `create index owed_follow_up on owed (follow_up_request_id)`,
  ];
}
