import { describe, expect, it } from 'vitest';
import type { ExamRequest } from '../../src/planning/index.js';
import { countedKinds, kindsOf, mostKinds } from '../../src/throughput/index.js';
import { requests } from './ground.js';

describe('the mix of requests', () => {
  it('comes in the wanted shares, by exam and by group at once', () => {
    const kinds = kindsOf(requests, {
      examShares: { knee: 0.5, 'brain-general': 0.3, liver: 0.2 },
      groupShares: { settled: 0.6, restless: 0.4 },
    });
    const booked = kinds.filter((k) => k.group !== 'emergency');
    const sum = (of: (k: (typeof booked)[number]) => boolean) =>
      booked.filter(of).reduce((a, k) => a + k.weight, 0);
    expect(sum((k) => k.request.examId === 'knee')).toBeCloseTo(0.5, 3);
    expect(sum((k) => k.request.examId === 'liver')).toBeCloseTo(0.2, 3);
    expect(sum((k) => k.group === 'restless')).toBeCloseTo(0.4, 3);
    expect(sum(() => true)).toBeCloseTo(1, 9);
  });

  it('is that of the records when nothing is wanted', () => {
    const kinds = kindsOf([...requests, ...requests]);
    expect(kinds.length).toBeLessThanOrEqual(requests.length);
    const knees = requests.filter((r) => r.examId === 'knee').length;
    const booked = requests.filter(
      (r) => r.tolerance.patientClass !== 'emergency' && r.priority !== 'stat',
    );
    const share = kinds
      .filter((k) => k.request.examId === 'knee')
      .reduce((a, k) => a + k.weight, 0);
    expect(share).toBeCloseTo(knees / booked.length, 9);
  });
});

describe('more kinds of request than can be planned in minutes', () => {
  // Every request a kind of its own: a statement of stillness nobody else made.
  const many = Array.from({ length: 2000 }, (_, n) => {
    const request = requests[n % requests.length]!;
    const still = { kind: 'stated', seconds: 20 + n } as const;
    return { ...request, id: `M-${n}`, tolerance: { ...request.tolerance, still } };
  });
  const kinds = kindsOf(many);
  const share = (
    all: readonly { readonly request: ExamRequest; readonly weight: number }[],
    examId: string,
  ) => all.reduce((sum, k) => sum + (k.request.examId === examId ? k.weight : 0), 0);

  it('some stand for all, about as many as allowed', () => {
    expect(countedKinds(many)).toHaveLength(2000);
    expect(kinds.length).toBeGreaterThan(0.9 * mostKinds);
    expect(kinds.length).toBeLessThan(1.1 * mostKinds);
  });

  it('every exam keeps its share of the booked ones', () => {
    const booked = countedKinds(many).filter((k) => k.group !== 'emergency');
    const sampled = kinds.filter((k) => k.group !== 'emergency');
    for (const examId of new Set(booked.map((k) => k.request.examId)))
      expect(share(sampled, examId)).toBeCloseTo(share(booked, examId) / booked.length, 9);
  });

  it('they are as still in the middle as all of them', () => {
    const middle = (all: readonly { readonly request: ExamRequest; readonly weight: number }[]) => {
      const total = all.reduce((sum, k) => sum + k.weight, 0);
      return all.reduce((sum, { request: { tolerance }, weight }) => {
        const seconds = tolerance.still.kind === 'stated' ? tolerance.still.seconds : 0;
        return sum + (weight / total) * seconds;
      }, 0);
    };
    const of = (group: string) => (k: { readonly group: string }) => k.group === group;
    for (const group of ['settled', 'restless', 'inpatient'])
      expect(
        middle(kinds.filter(of(group))) / middle(countedKinds(many).filter(of(group))),
      ).toBeCloseTo(1, 1);
  });

  it('who is alike in all that matters is one kind', () => {
    const [first] = requests;
    const older = { ...first!.tolerance, ageYears: 80 };
    const alike = [
      first!,
      { ...first!, id: 'N-1', tolerance: older, escort: true, note: 'with a stick' },
    ];
    expect(first!.tolerance.ageYears).toBeGreaterThan(21);
    expect(countedKinds(alike)).toHaveLength(1);
  });
});
