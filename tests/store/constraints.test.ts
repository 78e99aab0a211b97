/**
 * The rules that must hold whatever program writes: tried with bare statements, past the store's own
 * code. The rules are those of the design; that a broken one is refused holds for any right schema.
 */
import { sql } from 'kysely';
import { inspect } from 'node:util';
import { expect, it } from 'vitest';
import { at, examRequest, freshStore, onEveryStore } from './ground.js';
import { StoreFault } from '../../src/store/index.js';

onEveryStore('the tables themselves', (kind) => {
  const oneOwed = async () => {
    const fresh = await freshStore(kind);
    const { store } = fresh;
    for (const id of ['R-1', 'R-2']) await store.requests.add(examRequest(id), 'Ina', 1);
    await store.bookings.place({ requestId: 'R-1', ...at(480, 30, ['sedation']) }, 'Ina', 2);
    await store.bookings.place({ requestId: 'R-2', ...at(600, 30) }, 'Ina', 2);
    const answers = [
      { questionId: 'a', name: 'A', grade: 'screening' },
      { questionId: 'b', name: 'B', grade: 'diagnostic' },
    ] as const;
    const dueDate = '2026-12-20';
    await store.owed.recordDone({ bookingId: 'R-1.1', version: 1, answers, dueDate }, 'Tom', 3);
    const tryOut = (statement: string) => sql.raw(statement).execute(fresh.database.kysely);
    return { ...fresh, tryOut };
  };
  const setOwed = (values: string) => `update owed set ${values} where id = 'R-1:a'`;

  it.each([
    [
      'a second claim on a scanner',
      `insert into claim select resource, tick, 'R-2.1' from claim where booking_id = 'R-1.1' and resource = 'scanner:mr1'`,
    ],
    [
      'a second claim on a team',
      `insert into claim select resource, tick, 'R-2.1' from claim where booking_id = 'R-1.1' and resource = 'team:sedation'`,
    ],
    ['a claim without a booking', `insert into claim values ('scanner:mr9', 1, 'nobody')`],
    [
      'a second place of a request',
      `insert into booking select 'R-2.2', request_id, scanner_id, date, 700, slot_min, teams, status, plan, version from booking where id = 'R-2.1'`,
    ],
    ['a status that is none', `update booking set status = 'maybe' where id = 'R-2.1'`],
    ['a change by nobody', `update change set who = '  '`],
    [
      'two undos of one change',
      `insert into change (at_ms, who, what, thing_id, action, undoes) values (1, 'x', 'booking', 'x', 'undone', 1), (1, 'x', 'booking', 'x', 'undone', 1)`,
    ],
    ['a diagnostic answer that is owed', setOwed(`grade = 'diagnostic'`)],
    ['a sign-off without reason', setOwed(`state = 'signed off', signed_by = 'Dr. Quill'`)],
    [
      'a sign-off with a blank reason',
      setOwed(`state = 'signed off', signed_by = 'Dr. Quill', signed_reason = '  '`),
    ],
    [
      'a sign-off without a name',
      setOwed(`state = 'signed off', signed_by = '', signed_reason = 'seen'`),
    ],
    ['an answer from nowhere', setOwed(`state = 'answered'`)],
    [
      'an answer of a request that gave none',
      setOwed(`state = 'answered', answered_by_request_id = 'R-2', answered_grade = 'diagnostic'`),
    ],
    [
      'an answer that was only screening',
      setOwed(`state = 'answered', answered_by_request_id = 'R-1', answered_grade = 'screening'`),
    ],
    [
      'an answer to another question',
      setOwed(`state = 'answered', answered_by_request_id = 'R-1', answered_grade = 'diagnostic'`),
    ],
    ['a follow-up that is booked but not named', setOwed(`state = 'follow-up booked'`)],
    ['a request that vanishes with an answer owed', `delete from request where id = 'R-1'`],
    [
      'a diagnostic grade taken back to text that is no grade',
      `update done_answer set grade = 'fine'`,
    ],
  ])('refuse %s', async (_what, statement) => {
    const { tryOut } = await oneOwed();
    await expect(tryOut(statement)).rejects.toThrow(/constraint/i);
  });

  it('let a right sign-off and a right answer through', async () => {
    const { tryOut, store } = await oneOwed();
    await tryOut(setOwed(`state = 'signed off', signed_by = 'Dr. Quill', signed_reason = 'seen'`));
    expect((await store.owed.get('R-1:a'))?.state).toBe('signed off');
    const back = `state = 'answered', signed_by = null, signed_reason = null`;
    await tryOut(`insert into done_answer values ('R-2', 'a', 'diagnostic', 9)`);
    await tryOut(setOwed(`${back}, answered_by_request_id = 'R-2', answered_grade = 'diagnostic'`));
    expect((await store.owed.get('R-1:a'))?.state).toBe('answered');
  });

  it('a refused statement throws a fault that names the rule and nothing of the patient', async () => {
    const { store } = await oneOwed();
    const body = examRequest('R-7', { note: 'weeps at night' });
    const changed = examRequest('R-2', { note: 'weeps at night' });
    const { version } = (await store.requests.get('R-2'))!;
    for (const write of [
      () => store.requests.add(body, '  ', 5),
      () => store.requests.change('R-2', version, { body: changed }, '', 5),
    ]) {
      const fault = await write().catch((e: unknown) => e);
      expect(fault).toBeInstanceOf(StoreFault);
      expect(inspect(fault, { depth: 9, showHidden: true })).not.toContain('weeps');
    }
    expect(await store.requests.get('R-7')).toBeUndefined();
    expect((await store.requests.get('R-2'))?.version).toBe(version);
  });

  it('a boolean bound by mistake is an error or a refused row, never the end of the process', async () => {
    const { database } = await oneOwed();
    const wrong = database.kysely
      .updateTable('request')
      .set({ version: true as unknown as number })
      .where('id', '=', 'R-1')
      .execute();
    await expect(wrong).rejects.toThrow();
    for (const value of [true, undefined, Number.NaN, new Date(0)]) {
      await database.kysely
        .selectFrom('request')
        .select('id')
        .where('version', '=', value as unknown as number)
        .execute()
        .catch(() => undefined);
    }
    expect(await database.kysely.selectFrom('request').select('id').execute()).toHaveLength(2);
  });
});
