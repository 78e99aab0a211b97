/** Requests and the hook for live pages. Every fact holds for any right store of this design. */
import { expect, it } from 'vitest';
import { at, examRequest, expectKind, freshStore, onEveryStore } from './ground.js';

onEveryStore('requests', (kind) => {
  it('a request comes back as it was put in, every field', async () => {
    const { store } = await freshStore(kind);
    const full = examRequest('R-1', {
      questionIds: ['meniscal-tear', 'effusion'],
      dueDate: '2026-12-18',
      canCome: { from: '2026-12-01', until: '2026-12-20', partOfDay: 'morning' },
      b1RmsLimitMicroTesla: 2.8,
      note: 'Ärmel "hoch"; 50 % – Knie\n2. Zeile',
      escort: true,
    });
    expectKind(await store.requests.add(full, 'Ina', 1_765_180_800_123), 'added');
    expect(await store.requests.get('R-1')).toEqual({
      id: 'R-1',
      version: 1,
      status: 'waiting',
      body: full,
      createdMs: 1_765_180_800_123,
      updatedMs: 1_765_180_800_123,
    });
    expect(await store.requests.get('R-2')).toBeUndefined();
  });

  it('a number in use is not given twice, and the first request stays', async () => {
    const { store } = await freshStore(kind);
    await store.requests.add(examRequest('R-1'), 'Ina', 1);
    const again = await store.requests.add(examRequest('R-1', { examId: 'liver' }), 'Jo', 2);
    expect(expectKind(again, 'exists').request.body.examId).toBe('knee');
    expect((await store.requests.get('R-1'))?.body.examId).toBe('knee');
    expect(await store.history.lastSeq()).toBe(1);
  });

  it('a stale version changes nothing; the history says which fields changed and from what', async () => {
    const { store } = await freshStore(kind);
    await store.requests.add(examRequest('R-1'), 'Ina', 1);
    const body = examRequest('R-1', { slotS: 2700, transport: 'bed' });
    expectKind(await store.requests.change('R-1', 1, { body }, 'Ina', 2), 'changed');
    const late = examRequest('R-1', { slotS: 600 });
    expectKind(await store.requests.change('R-1', 1, { body: late }, 'Jo', 3), 'stale');
    expect(await store.requests.get('R-1')).toMatchObject({
      version: 2,
      body,
      updatedMs: 2,
      createdMs: 1,
    });
    expect((await store.history.of('request', 'R-1')).at(-1)).toMatchObject({
      who: 'Ina',
      atMs: 2,
      action: 'changed',
      from: { slotS: 1800, transport: 'walking' },
      to: { slotS: 2700, transport: 'bed' },
    });
  });

  it('a booked request is not cancelled behind the back of its booking', async () => {
    const { store } = await freshStore(kind);
    await store.requests.add(examRequest('R-1'), 'Ina', 1);
    await store.bookings.place({ requestId: 'R-1', ...at(480, 30) }, 'Ina', 2);
    expectKind(await store.requests.change('R-1', 2, { status: 'cancelled' }, 'Ina', 3), 'refused');
    expect((await store.requests.get('R-1'))?.status).toBe('booked');
  });

  it('lists in the order they came in, all or by status', async () => {
    const { store } = await freshStore(kind);
    await store.requests.add(examRequest('R-3'), 'Ina', 1);
    await store.requests.add(examRequest('R-1'), 'Ina', 2);
    await store.requests.add(examRequest('R-2'), 'Ina', 3);
    await store.requests.change('R-1', 1, { status: 'cancelled' }, 'Ina', 4);
    expect((await store.requests.list()).map((r) => r.id)).toEqual(['R-3', 'R-1', 'R-2']);
    expect((await store.requests.list({ status: 'waiting' })).map((r) => r.id)).toEqual([
      'R-3',
      'R-2',
    ]);
  });

  it('nothing about a patient is kept that has no field', async () => {
    const { store } = await freshStore(kind);
    const named = { ...examRequest('R-1'), patientName: 'Erika Muster' };
    const fault = await store.requests.add(named, 'Ina', 1).catch((e: unknown) => e);
    expect(String(fault)).not.toContain('Erika');
    expect(fault).toBeInstanceOf(Error);
    expect(await store.requests.list()).toEqual([]);
  });

  it('listeners hear of every commit once, after it, and of nothing that was not written', async () => {
    const { store } = await freshStore(kind);
    const heard: number[] = [];
    const seen: Promise<unknown>[] = [];
    const stop = store.onChange((seq) => {
      heard.push(seq);
      seen.push(store.requests.get('R-1'));
    });
    await store.requests.add(examRequest('R-1'), 'Ina', 1);
    await store.bookings.place({ requestId: 'R-1', ...at(480, 30) }, 'Ina', 2);
    await store.bookings.place({ requestId: 'R-1', ...at(480, 30) }, 'Ina', 2);
    await Promise.resolve();
    expect(heard).toEqual([1, await store.history.lastSeq()]);
    expect(await seen[0]).toMatchObject({ id: 'R-1' });
    stop();
    await store.requests.add(examRequest('R-2'), 'Ina', 3);
    await Promise.resolve();
    expect(heard).toHaveLength(2);
  });
});
