import { describe, expect, it } from 'vitest';
import { factorsFor, relativeContrastToNoise, rankOf, sequenceAt } from '../../src/exams/index.js';
import { readLibrary } from '../../src/interchange/index.js';
import { checkLibrary } from '../../src/planning/index.js';
import {
  assess,
  checkLimits,
  refusalOf,
  scanTime,
  trainDurationMs,
  untroubledBreathing,
} from '../../src/sequences/index.js';
import { readLibraryFiles, shippedLibraryFolder } from '../../src/cli/files.js';
import { ground, shipped, shippedProblems } from '../planning/ground.js';

const fields = [1.5, 3] as const;
const everySequence = [...shipped.sequences.values()].flatMap((atFields) => [...atFields.values()]);
const report = checkLibrary(shipped);

describe('the library that ships', () => {
  it('loads without a fault and passes its own check', () => {
    expect(shippedProblems).toEqual([]);
    expect(report.problems).toEqual([]);
  });

  it('holds the fifteen exams, each at both fields', () => {
    expect([...shipped.exams.keys()].sort()).toEqual([
      'bile-ducts',
      'brain-demyelination',
      'brain-general',
      'brain-stroke',
      'brain-tumour-follow-up',
      'brain-ventricles',
      'fetus-second-opinion',
      'knee',
      'liver',
      'pelvis-female',
      'prostate',
      'shoulder',
      'spine-cervical',
      'spine-lumbar',
      'spine-whole-compression',
    ]);
    for (const exam of shipped.exams.values()) {
      for (const view of exam.views) {
        for (const fieldT of fields)
          expect(
            sequenceAt(shipped, view.reference, fieldT),
            `${exam.id} ${view.id}`,
          ).toBeDefined();
      }
    }
  });

  it('every sequence says on what basis its values stand', () => {
    for (const s of everySequence) expect(s.source.length, s.id).toBeGreaterThan(10);
  });

  it('every echo train fits its repeat and at least one slice does', () => {
    for (const s of everySequence) {
      const time = scanTime(s, untroubledBreathing);
      expect(time.kind, s.id).toBe('possible');
      if (s.family === 'fast-spin-echo' && s.dimensions === 2) {
        expect(trainDurationMs(s) + (s.inversionTimeMs ?? 0), s.id).toBeLessThan(
          s.repetitionTimeMs,
        );
      }
    }
  });
});

describe('table time at full quality is one a department would recognise', () => {
  // Common practice, no source: plain joint or lumbar spine 15-25 min, brain 15-30, liver with contrast 25-45.
  const range = (examId: string): [number, number] | undefined => {
    if (examId === 'knee' || examId === 'shoulder') return [15, 25];
    if (examId.startsWith('brain')) return [15, 30];
    if (examId === 'liver') return [25, 45];
    return undefined;
  };
  for (const row of report.exams) {
    const limits = range(row.examId);
    if (limits === undefined) continue;
    it(`${row.name} at ${row.fieldT} T`, () => {
      expect(row.tableTimeS / 60).toBeGreaterThanOrEqual(limits[0]);
      expect(row.tableTimeS / 60).toBeLessThanOrEqual(limits[1]);
    });
  }
  it.each(fields)('plain lumbar spine at %d T: without its after-contrast view', (fieldT) => {
    const exam = shipped.exams.get('spine-lumbar');
    const plain = {
      ...exam!,
      id: 'plain',
      views: exam!.views.filter((v) => v.contrast === 'none'),
    };
    const row = checkLibrary({ ...shipped, exams: new Map([['plain', plain]]) }).exams.find(
      (r) => r.fieldT === fieldT,
    );
    expect((row?.tableTimeS ?? 0) / 60).toBeGreaterThanOrEqual(15);
    expect((row?.tableTimeS ?? 0) / 60).toBeLessThanOrEqual(25);
  });
});

describe('single-shot', () => {
  const single = everySequence.filter((s) => s.family === 'single-shot');

  it('a slice takes 0.3 to 1.1 s', () => {
    // Common practice, no source. Slabs, inverted slices and slices that wait for a breath are another matter.
    const plain = single.filter(
      (s) => s.plane !== 'slab' && s.inversionTimeMs === undefined && s.breathing !== 'triggered',
    );
    expect(plain.length).toBeGreaterThan(10);
    for (const s of plain) {
      const time = scanTime(s, untroubledBreathing);
      if (time.kind !== 'possible') throw new Error(s.id);
      const perSliceS = time.repetitionTimeMs / 1000;
      expect(perSliceS, s.id).toBeGreaterThanOrEqual(0.3);
      expect(perSliceS, s.id).toBeLessThanOrEqual(1.1);
    }
  });

  it('a half-Fourier train of 256 lines at ordinary spacing reads in about half a second', () => {
    // Common practice, no source: 144 to 154 echoes at 3.5 to 4.5 ms.
    const s = sequenceAt(shipped, 'head-ax-t2-ss-half', 3)!;
    const train = trainDurationMs({ ...s, matrixPhase: 256 }) / 1000;
    expect(train).toBeGreaterThan(0.4);
    expect(train).toBeLessThan(0.75);
  });

  it('reads grey against white matter with a relative contrast-to-noise well below fast spin echo', () => {
    // Published ratio 0.456 in one series of 31 (45.8 against 100.4; Korean series, checks section 9). That series'
    // protocols are not ours, so only "well below" is asked: under three quarters, over a fifth.
    for (const fieldT of fields) {
      const of = (id: string) => {
        const a = assess(sequenceAt(shipped, id, fieldT)!, {
          kind: 'border',
          tissue: 'grey matter',
          background: 'white matter',
          sizeMm: 2,
        });
        if (a.kind !== 'computed') throw new Error(a.why);
        return a;
      };
      const ratio = relativeContrastToNoise(of('head-ax-t2-ss-half'), of('head-ax-t2-fse'));
      expect(ratio).toBeLessThan(0.75);
      expect(ratio).toBeGreaterThan(0.2);
    }
  });

  it('keeps the border of fluid sharp: within the 2 mm a caliper tolerates', () => {
    for (const fieldT of fields) {
      const a = assess(sequenceAt(shipped, 'head-ax-t2-ss-half', fieldT)!, {
        kind: 'border',
        tissue: 'csf',
        background: 'white matter',
        sizeMm: 2,
      });
      if (a.kind !== 'computed') throw new Error(a.why);
      expect(a.borderWidthMm).toBeLessThan(2);
      expect(a.blurBackgroundMm).toBeGreaterThan(2 * a.blurTargetMm);
    }
  });
});

describe('fast spin echo takes 20 to 60 % of the matching spin echo', () => {
  // Published: 25-50 % in head and neck (Radiology 1993;188), 33-25 % in children's brains, 40 % in the spine (checks,
  // section 3). The range asked is the wider one of the starting-library design.
  const pairs: [string, string][] = everySequence
    .filter((s) => s.family === 'spin-echo' && s.weighting === 'T2' && s.fieldT === 3)
    .map((s) => [s.id.replace(/-se$/, '-fse'), s.id]);
  it('there is at least one pair', () => expect(pairs.length).toBeGreaterThan(0));
  it.each(pairs)('%s against %s', (fast, slow) => {
    for (const fieldT of fields) {
      const seconds = (id: string) => {
        const time = scanTime(sequenceAt(shipped, id, fieldT)!, untroubledBreathing);
        return time.kind === 'possible' ? time.acquisitionS : NaN;
      };
      expect(seconds(fast) / seconds(slow)).toBeGreaterThanOrEqual(0.2);
      expect(seconds(fast) / seconds(slow)).toBeLessThanOrEqual(0.6);
    }
  });
});

describe('published limits', () => {
  it("a candidate outside its view's limits, or of a kind not accepted, is capped below diagnostic", () => {
    let outside = 0;
    for (const exam of shipped.exams.values()) {
      for (const view of exam.views) {
        if (view.limits === undefined) continue;
        for (const id of view.candidates) {
          for (const fieldT of fields) {
            const sequence = sequenceAt(shipped, id, fieldT);
            if (sequence === undefined) continue;
            const broken =
              checkLimits(sequence, view.limits).some((c) => !c.met) ||
              refusalOf(sequence, view.limits) !== undefined;
            if (!broken) continue;
            outside += 1;
            for (const question of exam.questions.filter((q) =>
              q.needs.some((n) => n.view === view.id),
            )) {
              const factors = factorsFor({
                policy: shipped.policy,
                exam,
                question,
                view,
                sequence,
                evidence: undefined,
              });
              const worst = Math.min(...factors.map((f) => rankOf(f.grade)));
              expect(worst, `${exam.id} ${view.id} ${id}`).toBeLessThan(rankOf('diagnostic'));
            }
          }
        }
      }
    }
    expect(outside).toBeGreaterThan(0);
  });

  it('full-quality sequences meet them', () => {
    for (const exam of shipped.exams.values()) {
      for (const view of exam.views) {
        if (view.limits === undefined) continue;
        for (const fieldT of fields) {
          const sequence = sequenceAt(shipped, view.reference, fieldT)!;
          expect(
            checkLimits(sequence, view.limits).filter((c) => !c.met),
            `${exam.id} ${view.id}`,
          ).toEqual([]);
          expect(refusalOf(sequence, view.limits)).toBeUndefined();
        }
      }
    }
  });

  it('pixel area is field of view over steps: 240 mm in 256 x 256 passes 1.0 mm2, in 256 x 192 fails', () => {
    // Derived from the accreditation definition, checks (operations, section 5): 0.8789 and 1.1719 mm2.
    const s = {
      ...sequenceAt(shipped, 'head-ax-t2-fse', 3)!,
      fovFrequencyMm: 240,
      fovPhaseMm: 240,
      matrixFrequency: 256,
    };
    const area = (matrixPhase: number) =>
      checkLimits({ ...s, matrixPhase }, { pixelAreaMm2: 1, source: 'test' })[0];
    expect(area(256)?.value).toBeCloseTo(0.8789, 4);
    expect(area(256)?.met).toBe(true);
    expect(area(192)?.value).toBeCloseTo(1.1719, 4);
    expect(area(192)?.met).toBe(false);
  });
});

describe('a library with faults', () => {
  const files = readLibraryFiles(shippedLibraryFolder);
  const changed = (path: string, from: string, to: string) =>
    files.map((f) => (f.path === path ? { ...f, text: f.text.replace(from, to) } : f));

  it('names file, line, entry, field and value, and keeps the rest', () => {
    const { library, problems } = readLibrary(
      changed(
        'sequences/head.yaml',
        'id: head-ax-t2-fse-quick',
        'id: head-ax-t2-fse-quick\n    averages: -2',
      ),
    );
    expect(problems[0]?.thing).toMatch(
      /sequences\/head\.yaml, line \d+, sequence "head-ax-t2-fse-quick", field averages/,
    );
    expect(problems[0]?.value).toBe('-2');
    expect(library?.exams.size).toBe(15);
    expect(library?.sequences.has('head-ax-t2-fse')).toBe(true);
  });

  it('an unknown field is pointed at, not ignored', () => {
    const { problems } = readLibrary(
      changed(
        'sequences/head.yaml',
        'id: head-ax-t2-fse-quick',
        'id: head-ax-t2-fse-quick\n    repetitionTime: 3',
      ),
    );
    expect(problems.some((p) => p.limit.includes('repetitionTime'))).toBe(true);
  });

  it('a tissue nobody knows takes its question out, and says which there are', () => {
    const { library, problems } = readLibrary(
      changed('exams/brain-general.yaml', 'tissue: oedema-like lesion', 'tissue: marzipan'),
    );
    expect(problems.some((p) => p.value === '"marzipan"' && p.limit.includes('white matter'))).toBe(
      true,
    );
    expect(library?.exams.get('brain-general')?.questions.some((q) => q.id === 'mass-effect')).toBe(
      false,
    );
    expect(
      library?.exams.get('brain-general')?.questions.some((q) => q.id === 'acute-infarct'),
    ).toBe(true);
  });

  it('broken indentation is a line number, not a crash', () => {
    const { problems, library } = readLibrary([
      ...files.filter((f) => f.path !== 'exams/knee.yaml'),
      { path: 'exams/knee.yaml', text: 'exam: knee\n  bad: [1,\n' },
    ]);
    expect(problems[0]?.thing).toMatch(/exams\/knee\.yaml, line \d+/);
    expect(library?.exams.size).toBe(14);
  });

  it('a policy whose levels run the wrong way is refused', () => {
    const { library, problems } = readLibrary(
      changed(
        'policy.yaml',
        'diagnostic: 0.7, targeted: 0.5, screening: 0.25',
        'diagnostic: 0.2, targeted: 0.5, screening: 0.25',
      ),
    );
    expect(library).toBeUndefined();
    expect(problems[0]?.thing).toContain('policy.yaml');
  });

  it('no files at all is said in words', () => {
    expect(readLibrary([]).problems[0]?.value).toBe('missing');
  });
});

describe('evidence', () => {
  it('is worked out for every target at both fields, or says why not', () => {
    let computed = 0;
    for (const exam of shipped.exams.values()) {
      for (const question of exam.questions) {
        for (const need of question.needs) {
          const view = exam.views.find((v) => v.id === need.view)!;
          for (const fieldT of fields) {
            const found = ground.evidence.of(
              view,
              sequenceAt(shipped, view.reference, fieldT)!,
              need.target,
            );
            if (found === undefined) continue;
            if (found.own.kind === 'computed') {
              computed += 1;
              expect(
                found.own.contrastToNoise,
                `${exam.id} ${question.id} ${view.id}`,
              ).toBeGreaterThan(0);
            } else expect(found.own.why.length).toBeGreaterThan(10);
          }
        }
      }
    }
    expect(computed).toBeGreaterThan(60);
  });
});
