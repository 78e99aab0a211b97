/**
 * Answers owed. The rule is the project's own: a question below diagnostic stays on the list until a
 * diagnostic answer is done or a clinician signs it off with name and reason.
 */
import { expect, it } from 'vitest';
import type { Grade } from '../../src/exams/index.js';
import { expectWhole } from './check-whole.js';
import { at, examRequest, expectKind, freshStore, onEveryStore, type Fresh } from './ground.js';

const tear = 'meniscal-tear';

onEveryStore('answers owed', (kind) => {
  /** A request, placed and done with these grades; hour by hour, so that places do not meet. */
  const examDone = async (
    { store }: Fresh,
    id: string,
    hour: number,
    grades: Readonly<Record<string, Grade>>,
  ) => {
    if ((await store.requests.get(id)) === undefined)
      await store.requests.add(examRequest(id), 'Ina', 1);
    let booking = await store.bookings.ofRequest(id);
    if (booking === undefined) {
      const place = { requestId: id, ...at(hour * 60, 30) };
      booking = expectKind(await store.bookings.place(place, 'Ina', 2), 'placed').booking;
    }
    const answers = Object.entries(grades).map(([questionId, grade]) => ({
      questionId,
      name: `question ${questionId}`,
      grade,
    }));
    const exam = {
      bookingId: booking.id,
      version: booking.version,
      answers,
      dueDate: '2026-12-20',
    };
    return expectKind(await store.owed.recordDone(exam, 'Tom', 3), 'done');
  };

  it('every answer below diagnostic of a done exam is owed, the diagnostic ones are not', async () => {
    const fresh = await freshStore(kind);
    const { booking } = await examDone(fresh, 'R-1', 8, {
      a: 'diagnostic',
      b: 'targeted',
      c: 'screening',
      d: 'none',
    });
    expect(booking.status).toBe('fulfilled');
    expect((await fresh.store.requests.get('R-1'))?.status).toBe('done');
    const owed = await fresh.store.owed.list();
    expect(owed.map((o) => [o.questionId, o.grade, o.state, o.dueDate])).toEqual([
      ['b', 'targeted', 'owed', '2026-12-20'],
      ['c', 'screening', 'owed', '2026-12-20'],
      ['d', 'none', 'owed', '2026-12-20'],
    ]);
    await expectWhole(fresh.database);
  });

  it('an exam is not filed as done while a question it asks has no grade', async () => {
    const { store } = await freshStore(kind);
    await store.requests.add(examRequest('R-1', { questionIds: [tear, 'effusion'] }), 'Ina', 1);
    await store.bookings.place({ requestId: 'R-1', ...at(480, 30) }, 'Ina', 2);
    const one = { questionId: tear, name: 'Meniscal tear', grade: 'diagnostic' } as const;
    for (const answers of [[], [one]]) {
      const exam = { bookingId: 'R-1.1', version: 1, answers, dueDate: '2026-12-20' };
      expectKind(await store.owed.recordDone(exam, 'Tom', 3), 'refused');
    }
    expect((await store.bookings.get('R-1.1'))?.status).toBe('booked');
  });

  it('the cycle: owed, follow-up named, booked, done diagnostic, answered', async () => {
    const fresh = await freshStore(kind);
    const { store } = fresh;
    await examDone(fresh, 'R-1', 8, { [tear]: 'screening' });
    const id = `R-1:${tear}`;
    await store.requests.add(examRequest('R-2'), 'Ina', 4);
    const named = expectKind(await store.owed.bookFollowUp(id, 1, 'R-2', 'Ina', 5), 'changed').owed;
    expect(named).toMatchObject({ state: 'owed', followUpRequestId: 'R-2' });
    await store.bookings.place({ requestId: 'R-2', ...at(600, 30) }, 'Ina', 6);
    expect(await store.owed.get(id)).toMatchObject({ state: 'follow-up booked' });
    await examDone(fresh, 'R-2', 10, { [tear]: 'diagnostic' });
    expect(await store.owed.get(id)).toMatchObject({
      state: 'answered',
      answeredByRequestId: 'R-2',
    });
    expect(await store.owed.list({ states: ['owed', 'follow-up booked'] })).toEqual([]);
    const actions = (await store.history.of('owed', id)).map((c) => c.action);
    expect(actions).toEqual(['owed', 'follow-up named', 'follow-up booked', 'answered']);
  });

  it('a follow-up that is no better leaves one answer owed, with the better grade of the two', async () => {
    const fresh = await freshStore(kind);
    const { store } = fresh;
    await examDone(fresh, 'R-1', 8, { a: 'screening', b: 'targeted' });
    await store.requests.add(examRequest('R-2'), 'Ina', 4);
    await store.bookings.place({ requestId: 'R-2', ...at(600, 30) }, 'Ina', 4);
    await store.owed.bookFollowUp('R-1:a', 1, 'R-2', 'Ina', 5);
    await store.owed.bookFollowUp('R-1:b', 1, 'R-2', 'Ina', 5);
    await examDone(fresh, 'R-2', 10, { a: 'targeted', b: 'screening', c: 'none' });
    const list = await store.owed.list();
    expect(list.map((o) => [o.id, o.grade, o.state, o.followUpRequestId])).toEqual([
      ['R-1:a', 'targeted', 'owed', null],
      ['R-1:b', 'targeted', 'owed', null],
      ['R-2:c', 'none', 'owed', null],
    ]);
  });

  it('"follow-up booked" stands only while the follow-up has a place', async () => {
    const fresh = await freshStore(kind);
    const { store } = fresh;
    await examDone(fresh, 'R-1', 8, { [tear]: 'none' });
    const id = `R-1:${tear}`;
    await store.requests.add(examRequest('R-2'), 'Ina', 4);
    await store.bookings.place({ requestId: 'R-2', ...at(600, 30) }, 'Ina', 4);
    const booked = expectKind(
      await store.owed.bookFollowUp(id, 1, 'R-2', 'Ina', 5),
      'changed',
    ).owed;
    expect(booked.state).toBe('follow-up booked');
    await store.bookings.setStatus('R-2.1', 1, 'noshow', 'Ina', 6);
    expect(await store.owed.get(id)).toMatchObject({ state: 'owed', followUpRequestId: 'R-2' });
    await store.bookings.setStatus('R-2.1', 2, 'arrived', 'Ina', 7);
    expect(await store.owed.get(id)).toMatchObject({ state: 'follow-up booked' });
    await store.bookings.cancel('R-2.1', 3, 'Ina', 8);
    const { version } = (await store.requests.get('R-2'))!;
    await store.requests.change('R-2', version, { status: 'cancelled' }, 'Ina', 9);
    expect(await store.owed.get(id)).toMatchObject({ state: 'owed', followUpRequestId: null });
  });

  it('a follow-up must be able to answer: another request, open, that asks the question', async () => {
    const fresh = await freshStore(kind);
    const { store } = fresh;
    await examDone(fresh, 'R-1', 8, { [tear]: 'none' });
    await examDone(fresh, 'R-2', 10, { [tear]: 'diagnostic' });
    await store.requests.add(examRequest('R-3', { questionIds: ['effusion'] }), 'Ina', 4);
    for (const requestId of ['R-1', 'R-2', 'R-3', 'R-9']) {
      expectKind(await store.owed.bookFollowUp(`R-1:${tear}`, 1, requestId, 'Ina', 5), 'refused');
    }
  });

  it('only a diagnostic answer on record, to the same question, closes it', async () => {
    const fresh = await freshStore(kind);
    const { store } = fresh;
    await examDone(fresh, 'R-1', 8, { [tear]: 'none' });
    await examDone(fresh, 'R-2', 10, { [tear]: 'targeted', effusion: 'diagnostic' });
    await examDone(fresh, 'R-3', 12, { [tear]: 'diagnostic' });
    const id = `R-1:${tear}`;
    expectKind(await store.owed.answer(id, 1, 'R-2', 'Ina', 5), 'refused');
    expectKind(await store.owed.answer(id, 1, 'R-9', 'Ina', 5), 'refused');
    expectKind(await store.owed.answer(id, 1, 'R-3', 'Ina', 5), 'changed');
    expectKind(await store.owed.answer(id, 2, 'R-3', 'Ina', 5), 'refused');
  });

  it('a sign-off without a name or a reason is refused; with both it closes, once', async () => {
    const fresh = await freshStore(kind);
    const { store } = fresh;
    await examDone(fresh, 'R-1', 8, { [tear]: 'screening' });
    const id = `R-1:${tear}`;
    const sign = (version: number, signedBy: string, reason: string) =>
      store.owed.signOff(id, version, { signedBy, reason }, 'Ina', 5);
    expectKind(await sign(1, '', 'answered by ultrasound'), 'refused');
    expectKind(await sign(1, ' \t', 'answered by ultrasound'), 'refused');
    expectKind(await sign(1, 'Dr. Quill', ' \n '), 'refused');
    expectKind(await sign(2, 'Dr. Quill', 'answered by ultrasound'), 'stale');
    expect((await store.owed.get(id))?.state).toBe('owed');
    expectKind(await sign(1, 'Dr. Quill', 'answered by ultrasound'), 'changed');
    expect(await store.owed.get(id)).toMatchObject({
      state: 'signed off',
      signedBy: 'Dr. Quill',
      signedReason: 'answered by ultrasound',
    });
    expectKind(await sign(2, 'Dr. Other', 'again'), 'refused');
  });
});
