import { describe, expect, it } from 'vitest';
import { gradeWords, sequenceAt } from '../../src/exams/index.js';
import { headPhantom } from '../../src/physics/index.js';
import { previewInput } from '../../src/sequences/index.js';
import { comparedPictures, fullQualityOf } from '../../src/web/view-models/compared-pictures.js';
import { parameterRows } from '../../src/web/view-models/parameter-rows.js';
import { policyPage } from '../../src/web/view-models/policy-page.js';
import { policyValueLines } from '../../src/web/view-models/policy-values.js';
import { inWords } from '../../src/web/view-models/value-words.js';
import { shipped } from '../planning/ground.js';

// Which words stand where is ours (no source); the units are those the names of the code end in.

/** Every node that carries a value with basis and source, counted without the page's own walk. */
function sourcedValues(text: string): number {
  return text.match(/"source":/g)?.length ?? 0;
}

describe('the policy page', () => {
  const page = policyPage(shipped);
  it('leaves no value and no signed entry out', () => {
    const { entries } = shipped.policy.catalogue;
    const rows = page.sections.reduce((sum, s) => sum + s.rows.length, 0);
    const all = sourcedValues(JSON.stringify(shipped.policy));
    expect(page.entries).toHaveLength(entries.length);
    expect(rows + entries.length).toBe(all);
  });
  it('every row says what it is, a value, its basis and its source', () => {
    for (const row of page.sections.flatMap((s) => s.rows)) {
      expect(row.what, JSON.stringify(row)).not.toBe('');
      expect(row.lines.length, row.what).toBeGreaterThan(0);
      expect(row.source, row.what).not.toBe('');
      expect(['published', 'common practice', 'assumption'], row.what).toContain(row.basis);
    }
  });
  it('two rows of a section are never called the same', () => {
    for (const { name, rows } of page.sections)
      expect(new Set(rows.map((r) => r.what)).size, name).toBe(rows.length);
  });
});

describe('a value of the policy in words', () => {
  it('a level stands with the words of its grade', () => {
    const levels = { diagnostic: 0.7, targeted: 0.5, screening: 0.25 };
    const lines = policyValueLines(levels, ['movement', 'cleanChance']);
    expect(lines[0]).toBe('from 70 %: diagnostic');
    expect(lines[1]).toContain(gradeWords.targeted);
    expect(lines[2]).toBe('from 25 %: screening-grade, not diagnostic');
    expect(policyValueLines(levels, ['physics', 'borderOverCaliper'])[0]).toMatch(/^up to/);
  });
  it('a grade alone too', () => {
    expect(policyValueLines('screening', ['catalogue'])).toEqual([gradeWords.screening]);
  });
  it('figures carry their unit, chances are percent', () => {
    expect(policyValueLines(252, ['time', 'classExtraS', 'inpatient'])).toEqual([
      '252 s (4.2 min)',
    ]);
    expect(policyValueLines(1, ['owed', 'dueDays', 'stat'])).toEqual(['1 day']);
    expect(policyValueLines(8, ['tolerance', 'holdFromYears'])).toEqual(['8 years']);
    expect(policyValueLines(0.55, ['time', 'finishConfidence'])).toEqual(['55 %']);
    expect(policyValueLines({ chance: 0.925, atS: 1500 }, ['tolerance', 'still'])).toEqual([
      '92.5 % still do at 1500 s (25 min)',
    ]);
  });
});

describe('parameters of a sequence in words', () => {
  it('take the unit from the end of the name', () => {
    expect(inWords('repetitionTimeMs')).toEqual({ words: 'repetition time', unit: 'ms' });
    expect(inWords('rfEchoTrainLength')).toEqual({ words: 'RF echo train length', unit: '' });
    expect(inWords('bValuesSPerMm2')).toEqual({ words: 'b values', unit: 's/mm2' });
  });
  it('of every sequence leave nothing of the code behind', () => {
    for (const [id, fields] of shipped.sequences) {
      for (const sequence of fields.values()) {
        for (const { what, value } of parameterRows(sequence))
          expect(`${what}: ${value}`, id).not.toMatch(/undefined|\[|\{|object|[a-z][A-Z]/);
      }
    }
  });
});

describe('pictures side by side', () => {
  const at = (id: string) => {
    const sequence = sequenceAt(shipped, id, 3);
    if (sequence === undefined) throw new Error(`the shipped library has no ${id}`);
    return sequence;
  };
  it('full quality, the fallback, and full quality with movement', () => {
    const captions = comparedPictures(at('head-ax-t2-ss-half'), shipped).map((p) => p.caption);
    expect(captions).toHaveLength(3);
    expect(captions[0]).toMatch(/^Full quality: /);
    expect(captions[1]).toMatch(/^Fallback: .*single-shot/);
    expect(captions[2]).toMatch(/^Full quality if the patient shifts by 4 mm/);
  });
  it('a full-quality sequence is measured against itself', () => {
    for (const fields of shipped.sequences.values()) {
      for (const sequence of fields.values()) {
        const full = fullQualityOf(sequence, shipped);
        expect(fullQualityOf(full, shipped).id, sequence.id).toBe(full.id);
      }
    }
  });
  it('none after contrast medium, which the phantom does not take up, and none of a knee', () => {
    expect(previewInput(at('head-ax-t1-se-post'), headPhantom, 0)).toMatchObject({
      kind: 'not drawn',
      why: expect.stringContaining('contrast medium') as string,
    });
    expect(comparedPictures(at('head-ax-t1-se-post'), shipped)).toEqual([]);
    const knee = [...shipped.sequences.keys()].find((id) => id.startsWith('knee-'));
    expect(comparedPictures(at(knee ?? ''), shipped)).toEqual([]);
  });
  it('none of a slab, of blades or of gradient echo', () => {
    for (const id of ['head-inflow-gre3d', 'head-ax-t2-rotating', 'head-ax-sus-gre'])
      expect(previewInput(at(id), headPhantom, 0).kind, id).toBe('not drawn');
  });
});
