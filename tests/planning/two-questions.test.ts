import { describe, expect, it } from 'vitest';
import {
  factorsFor,
  lowestGrade,
  rankOf,
  relativeContrastToNoise,
  sequenceAt,
  type GradeFactor,
  type SitePolicy,
} from '../../src/exams/index.js';
import { families } from '../../src/sequences/index.js';
import { examNamed, ground, shipped, under } from './ground.js';

/** Factors of one question through one view's sequence at 3 T, without the patient. */
function factors(
  examId: string,
  questionId: string,
  viewId: string,
  sequenceId: string,
  policy?: SitePolicy,
) {
  const exam = examNamed(examId);
  const question = exam.questions.find((q) => q.id === questionId);
  const view = exam.views.find((v) => v.id === viewId);
  const sequence = sequenceAt(shipped, sequenceId, 3);
  if (!question || !view || !sequence) throw new Error('not in the library');
  const need = question.needs.find((n) => n.view === viewId);
  const on = policy === undefined ? ground : under(policy);
  const evidence = on.evidence.of(view, sequence, need?.target);
  return factorsFor({ policy: on.library.policy, exam, question, view, sequence, evidence });
}

const physics = (all: readonly GradeFactor[]) =>
  all.filter((f) => f.kind === 'contrast-to-noise' || f.kind === 'border');

/** A policy that would accept any family for any question. */
function openPolicy(questions: readonly string[]): SitePolicy {
  const { policy } = shipped;
  const otherwise = Object.fromEntries(
    families.map((f) => [f, { value: 'diagnostic', basis: 'assumption', source: 'test' }]),
  ) as unknown as SitePolicy['catalogue']['otherwise'];
  const entries = questions.map((question) => ({
    question,
    family: 'single-shot' as const,
    atMost: 'diagnostic' as const,
    because: 'test',
    basis: 'assumption' as const,
    source: 'test',
    signedBy: 'test',
    signedOn: '2026-01-01',
  }));
  return { ...policy, catalogue: { otherwise, entries } };
}

const singleShot = 'head-ax-t2-ss-half';

describe('two questions on one half-Fourier single-shot brain image', () => {
  it('ventricular size comes out targeted: its border is sharp enough, only the policy caps it', () => {
    const all = factors('brain-ventricles', 'ventricular-size', 'axial-t2', singleShot);
    expect(lowestGrade(all).grade).toBe('targeted');
    const border = physics(all).find((f) => f.kind === 'border');
    expect(border?.value).toBeLessThanOrEqual(border?.limit ?? 0);
    expect(Math.min(...physics(all).map((f) => rankOf(f.grade)))).toBeGreaterThanOrEqual(
      rankOf('targeted'),
    );
  });

  it('a 4 mm white-matter lesion comes out screening, from its own numbers', () => {
    const all = factors('brain-general', 'small-lesion', 'axial-t2', singleShot);
    expect(lowestGrade(all).grade).toBe('screening');
    const [contrast] = physics(all);
    expect(contrast?.grade).toBe('screening');
    expect(contrast?.value).toBeGreaterThan(0);
    expect(contrast?.sentence).toMatch(/4 mm target .* only \d+ % of the full-quality clarity/);
  });

  it('with every policy cap removed the lesion still does not reach diagnostic', () => {
    const policy = openPolicy(['brain-general/small-lesion']);
    const all = factors('brain-general', 'small-lesion', 'axial-t2', singleShot, policy);
    expect(all.find((f) => f.kind === 'catalogue')?.grade).toBe('diagnostic');
    expect(lowestGrade(all).grade).not.toBe('diagnostic');
  });

  it('the same lesion on the multi-shot reference is diagnostic', () => {
    const all = factors('brain-general', 'small-lesion', 'axial-t2', 'head-ax-t2-fse');
    expect(lowestGrade(all).grade).toBe('diagnostic');
  });
});

describe('acute infarct', () => {
  const single = [...shipped.sequences.keys()].filter(
    (id) => sequenceAt(shipped, id, 3)?.family === 'single-shot' && id.startsWith('head-'),
  );

  it.each(['brain-general', 'brain-stroke'])(
    'in %s no single-shot ever makes it diagnostic, not even under a policy that accepts everything',
    (examId) => {
      expect(single.length).toBeGreaterThan(3);
      const question = examNamed(examId).questions.find((q) => q.id === 'acute-infarct');
      for (const policy of [undefined, openPolicy([`${examId}/acute-infarct`])]) {
        // The best single-shot for each needed view; the question is worth the lowest of them.
        const perView = (question?.needs ?? []).map((need) =>
          Math.max(
            ...single.map((id) =>
              rankOf(lowestGrade(factors(examId, 'acute-infarct', need.view, id, policy)).grade),
            ),
          ),
        );
        expect(perView.length).toBeGreaterThan(0);
        expect(Math.min(...perView)).toBeLessThan(rankOf('diagnostic'));
      }
    },
  );

  it('on a diffusion view a single-shot is worth nothing, and the reason says why', () => {
    const all = factors(
      'brain-general',
      'acute-infarct',
      'axial-dwi',
      singleShot,
      openPolicy(['brain-general/acute-infarct']),
    );
    expect(lowestGrade(all).grade).toBe('none');
    expect(all.find((f) => f.kind === 'weighting')?.sentence).toContain('needs diffusion images');
  });

  it('even looked for on T2, the early infarct shows a small part of what diffusion shows', () => {
    // Physics alone, weighting rule set aside: the T2 change of a four-hour infarct (Damion 2019) against the diffusion
    // reference at the same field.
    const exam = examNamed('brain-general');
    const view = exam.views.find((v) => v.id === 'axial-dwi');
    const target = exam.questions.find((q) => q.id === 'acute-infarct')?.needs[0]?.target;
    const sequence = sequenceAt(shipped, singleShot, 3);
    if (!view || !target || !sequence) throw new Error('not in the library');
    const evidence = ground.evidence.of(view, sequence, target);
    if (evidence?.own.kind !== 'computed' || evidence.reference.kind !== 'computed')
      throw new Error('not computed');
    expect(relativeContrastToNoise(evidence.own, evidence.reference)).toBeLessThan(
      shipped.policy.physics.relativeContrastToNoise.value.diagnostic,
    );
  });
});
