import { describe, expect, it } from 'vitest';
import { offersFor } from '../../src/day/index.js';
import { prepare } from '../../src/planning/index.js';
import { chooseCurve, chooseExactly } from '../../src/planning/solver/exact.js';
import { at15, at3, calm, ground, requestFor } from '../planning/ground.js';

const restless = { ...calm, still: { kind: 'stated' as const, seconds: 40 } };
const requests = ['brain-general', 'brain-ventricles', 'liver', 'knee', 'spine-lumbar'].flatMap(
  (exam) => [requestFor(exam), requestFor(exam, { tolerance: restless })],
);

describe('offers', () => {
  // Source: the exact choice of one exam, asked for each slot on its own; it has its own second solver.
  it('are what the exact choice gets in each slot', () => {
    let compared = 0;
    for (const request of requests)
      for (const [id, offers] of offersFor(request, [at3, at15], ground, chooseCurve).offers)
        for (const offer of offers) {
          const scanner = id === at3.id ? at3 : at15;
          const ready = prepare({ ...request, slotS: 60 * offer.slotMin }, scanner, ground);
          if (ready.kind !== 'ok') throw new Error('refused');
          const { objective, chance } = chooseExactly(ready.value.problem);
          const { diagnostic, targeted, screening } = offer;
          expect({ diagnostic, targeted, screening }).toEqual({
            diagnostic: objective.diagnostic,
            targeted: objective.targeted,
            screening: objective.screening,
          });
          expect(offer.chance).toBeCloseTo(chance, 9);
          compared++;
        }
    expect(compared).toBeGreaterThan(20);
  });

  // Source: holds for any right planner.
  it('never get less in a longer slot, and never name a low grade without its words', () => {
    let low = 0;
    for (const request of requests)
      for (const offers of offersFor(request, [at3, at15], ground, chooseCurve).offers.values()) {
        offers.forEach((offer, n) => {
          const shorter = offers[n - 1];
          if (shorter !== undefined) {
            expect(offer.slotMin).toBeGreaterThan(shorter.slotMin);
            expect(offer.diagnostic).toBeGreaterThanOrEqual(shorter.diagnostic);
          }
          for (const part of offer.words.split('; ')) {
            if (!/: (screening|targeted)/.test(part)) continue;
            low++;
            expect(part).toMatch(/not diagnostic/);
          }
        });
      }
    expect(low).toBeGreaterThan(5);
  });

  // Source: holds for any right planner: a scanner without the coil cannot take the exam.
  it('say why a scanner without the coil has none', () => {
    const bare = { ...at3, id: 'bare', coils: ['head'] };
    const { offers, cannot } = offersFor(requestFor('knee'), [bare, at15], ground, chooseCurve);
    expect([...offers.keys()]).toEqual(['S15']);
    expect(cannot.get('bare')).toMatch(/knee coil/);
  });
});
