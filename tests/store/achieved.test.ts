/** What patients achieved, kept with the exam that is filed as done. The rules are the project's own. */
import { sql } from 'kysely';
import { expect, it } from 'vitest';
import type { AchievedRecord } from '../../src/tolerance/index.js';
import { keepAchieved } from '../../src/store/achieved.js';
import { inTransaction } from '../../src/store/in-transaction.js';
import { at, examRequest, expectKind, freshStore, onEveryStore, openAgain } from './ground.js';

const records: readonly AchievedRecord[] = [
  {
    ...{ kind: 'still', group: 'outpatient', seconds: 612.4, censored: true, on: '2026-12-08' },
    ...{ statedS: 1200, saidBy: 'patient' },
  },
  { kind: 'hold', group: 'adult', seconds: 8, censored: false, on: '2026-12-08' },
  { kind: 'exam', group: 'knee', seconds: 1500, censored: false, on: '2026-12-08', statedS: 1380 },
];
const answers = [{ questionId: 'a', name: 'A', grade: 'diagnostic' }] as const;
const done = { bookingId: 'R-1.1', version: 1, answers, dueDate: '2026-12-20' };

onEveryStore('what patients achieved', (kind) => {
  const booked = async () => {
    const fresh = await freshStore(kind);
    await fresh.store.requests.add(examRequest('R-1'), 'Ina', 1);
    await fresh.store.bookings.place({ requestId: 'R-1', ...at(480, 30) }, 'Ina', 2);
    return fresh;
  };
  const inAnyOrder = (list: readonly AchievedRecord[]) =>
    [...list].sort((a, b) => a.kind.localeCompare(b.kind));

  it('is kept as it was said when the exam is filed as done, and found again', async () => {
    const fresh = await booked();
    expect(await fresh.store.achieved.list()).toEqual([]);
    expectKind(await fresh.store.owed.recordDone({ ...done, achieved: records }, 'Tom', 3), 'done');
    expect(inAnyOrder(await fresh.store.achieved.list())).toEqual(inAnyOrder(records));
    if (kind === 'sqlite in memory') return;
    const again = await openAgain(fresh.settings);
    expect(await again.store.achieved.list()).toHaveLength(3);
  });

  it('an exam that is not filed leaves nothing', async () => {
    const { store } = await booked();
    const stale = { ...done, version: 7, achieved: records };
    expectKind(await store.owed.recordDone(stale, 'Tom', 3), 'stale');
    const ungraded = { ...done, answers: [], achieved: records };
    expectKind(await store.owed.recordDone(ungraded, 'Tom', 3), 'refused');
    expect(await store.achieved.list()).toEqual([]);
  });

  it('the same exam is never counted twice, whoever tries', async () => {
    const { store, database } = await booked();
    const exam = { ...done, achieved: records };
    expectKind(await store.owed.recordDone(exam, 'Tom', 3), 'done');
    expectKind(await store.owed.recordDone({ ...exam, version: 2 }, 'Tom', 4), 'refused');
    await inTransaction(database, { who: 'Tom', atMs: 5 }, (tx) =>
      keepAchieved(tx, 'R-1.1', records),
    );
    expect(await store.achieved.list()).toHaveLength(3);
  });

  it('nothing of a record leads to the request, and nothing is taken out or changed', async () => {
    const { store, database } = await booked();
    await store.owed.recordDone({ ...done, achieved: records }, 'Tom', 3);
    const rows = await database.kysely.selectFrom('achieved').selectAll().execute();
    expect(JSON.stringify(rows)).not.toMatch(/R-1|Ina|Tom/);
    expect(Object.keys(rows[0]!).sort()).toEqual([
      ...['censored', 'id', 'kind', 'patient_group', 'recorded_on', 'said_by', 'seconds'],
      'stated_s',
    ]);
    for (const statement of [
      'update achieved set seconds = 9999',
      'delete from achieved',
      'delete from counted_exam',
      `insert into achieved (id, kind, patient_group, seconds, censored, recorded_on) values ('x', 'still', ' ', 1, 0, '2026-12-08')`,
      `insert into achieved (id, kind, patient_group, seconds, censored, recorded_on) values ('x', 'still', 'a', -1, 0, '2026-12-08')`,
      `insert into counted_exam values ('nobody.1')`,
    ])
      await expect(sql.raw(statement).execute(database.kysely), statement).rejects.toThrow();
    expect(await store.achieved.list()).toHaveLength(3);
  });
});
