import { describe, expect, it } from 'vitest';
import { tissueAt, tissueNames } from '../../src/physics/index.js';
import { ProblemError } from '../../src/shared/index.js';

describe('tissues', () => {
  it.each([
    ['white matter', 3, 832, 79.6],
    ['grey matter', 3, 1331, 110],
    ['csf', 3, 4308.7, 1885.5],
    ['liver', 3, 809, 34],
    ['spleen', 3, 1328, 61],
    ['prostate', 3, 1597, 74],
    ['oedema-like lesion', 1.5, 752, 237],
    ['cartilage', 1.5, 1060, 42.1],
  ] as const)('%s at %d T is the published %d / %d', (name, field, t1, t2) => {
    // Table equality with the checks, section 1; never "truth" (white matter T1 at 3 T spans 699-1735 ms).
    expect(tissueAt(name, field)).toMatchObject({ t1Ms: t1, t2Ms: t2 });
  });
  it('every tissue is sane and says where it comes from', () => {
    for (const name of tissueNames) {
      for (const field of [1.5, 3] as const) {
        const t = tissueAt(name, field);
        expect(t.t1Ms).toBeGreaterThan(t.t2Ms);
        expect(t.protonDensity).toBeGreaterThanOrEqual(0);
        expect(t.protonDensity).toBeLessThanOrEqual(1);
        expect(t.source.length).toBeGreaterThan(5);
      }
    }
  });
  it('an unknown tissue is an error that names it and the field', () => {
    expect(() => tissueAt('marzipan', 3)).toThrow(ProblemError);
    expect(() => tissueAt('marzipan', 3)).toThrow(/tissue at 3 T: "marzipan"/);
  });
});
