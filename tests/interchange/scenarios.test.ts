import { join } from 'node:path';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { demoFolder, readText } from '../../src/cli/files.js';
import { openDepartment, openGround } from '../../src/cli/ground.js';
import { readScenarios } from '../../src/interchange/index.js';
import { sayProblem } from '../../src/shared/index.js';
import { usualScenario, type Scenario } from '../../src/throughput/index.js';

const examIds = [...openGround().ground.library.exams.keys()];
const department = openDepartment();
const usual: Scenario = { ...usualScenario(department, []).scenario, cutShortAfterMin: 15 };

const read = (text: string) => readScenarios({ path: 'month.yaml', text }, usual, { examIds });

function scenarios(text: string): readonly Scenario[] {
  const outcome = read(text);
  if (outcome.kind === 'refused') throw new Error(outcome.problems.map(sayProblem).join('\n'));
  return outcome.value;
}

function refusals(text: string): readonly string[] {
  const outcome = read(text);
  return outcome.kind === 'refused' ? outcome.problems.map(sayProblem) : [];
}

describe('a scenario file', () => {
  it('says only what differs: the rest is the department as it is', () => {
    const [first] = scenarios('scenarios:\n  - name: As it is\n');
    expect(first).toEqual({ ...usual, name: 'As it is' });
  });

  it('what stands at the top counts for all, what stands in a scenario for that one', () => {
    const [first, second] = scenarios(
      'requestsPerDay: 60\nmonths: 3\nscenarios:\n  - name: A\n  - name: B\n    months: 7\n',
    );
    expect(first).toMatchObject({ requestsPerDay: 60, months: 3 });
    expect(second).toMatchObject({ requestsPerDay: 60, months: 7 });
  });

  it('the same in JSON', () => {
    const text = JSON.stringify({ months: 2, scenarios: [{ name: 'A', quickLooks: true }] });
    expect(scenarios(text)[0]).toMatchObject({ months: 2, quickLooks: true });
  });

  it('an exam is cut short as usual, after other minutes, or never', () => {
    const [asUsual, other, never] = scenarios(
      'scenarios:\n  - name: A\n  - { name: B, cutShortAfterMin: 0 }\n  - { name: C, cutShortAfterMin: never }\n',
    );
    expect(asUsual!.cutShortAfterMin).toBe(15);
    expect(other!.cutShortAfterMin).toBe(0);
    expect(never).not.toHaveProperty('cutShortAfterMin');
  });

  it('never at the top gives way to minutes in one scenario', () => {
    const [never, cut] = scenarios(
      'cutShortAfterMin: never\nscenarios:\n  - name: A\n  - { name: B, cutShortAfterMin: 5 }\n',
    );
    expect(never).not.toHaveProperty('cutShortAfterMin');
    expect(cut!.cutShortAfterMin).toBe(5);
  });

  it("names the department's scanners, or describes a new one in full", () => {
    const [one] = scenarios(
      [
        'scenarios:',
        '  - name: A',
        '    scanners:',
        '      - mr2',
        '      - id: van',
        '        name: Van in the yard',
        '        fieldT: 1.5',
        '        boreCm: 60',
        '        coils: [head]',
        '        hours: [{ from: "08:00", to: "12:00" }]',
        '',
      ].join('\n'),
    );
    expect(one!.scanners.map((s) => s.id)).toEqual(['mr2', 'van']);
    expect(one!.scanners[0]).toEqual(department.scanners.find((s) => s.id === 'mr2'));
    expect(one!.scanners[1]).toMatchObject({ hours: [{ fromMin: 480, toMin: 720 }], breaks: [] });
  });

  it('the one that ships is read whole', () => {
    expect(scenarios(readText(join(demoFolder, 'scenarios.yaml'))).length).toBeGreaterThan(1);
  });
});

describe('what cannot be used is named with line and field', () => {
  it.each<[string, string, RegExp]>([
    [
      'a field nobody knows',
      'scenarios:\n  - name: A\n    slotLength: 30\n',
      /month\.yaml, line \d+.*slotLength/,
    ],
    ['a field nobody knows at the top', 'lunch: long\nscenarios:\n  - name: A\n', /lunch/],
    [
      'a scanner nobody has',
      'scenarios:\n  - name: A\n    scanners: [mr1, mr9]\n',
      /line 3, scenario "A", field scanners: "mr9"; the department has: mr1, mr2, mr3\. /,
    ],
    [
      'an exam nobody knows',
      'scenarios:\n  - name: A\n    examShares: { elbow: 1 }\n',
      /line 3, scenario "A", field examShares: "elbow"; known exams: /,
    ],
    [
      'a negative rate, at the top for all',
      'requestsPerDay: -4\nscenarios:\n  - name: A\n',
      /line 1, scenario "A", field requestsPerDay: -4; a number from 0 to 500/,
    ],
    [
      'a million months in one of two',
      'scenarios:\n  - name: A\n  - name: B\n    months: 1000000\n',
      /line 4, scenario "B", field months: 1000000; a whole number from 1 to 500/,
    ],
    [
      'a slot of seven minutes',
      'scenarios:\n  - name: A\n    slots: { kind: fixed, minutes: 7 }\n',
      /line 3, scenario "A", field slots: 7 min; 10 to 90 minutes in steps of five/,
    ],
    [
      'words for a number',
      'scenarios:\n  - name: A\n    months: many\n',
      /line 3, .*field scenarios\.0\.months: "many"/,
    ],
    [
      'cut short sometimes',
      'scenarios:\n  - { name: A, cutShortAfterMin: sometimes }\n',
      /cutShortAfterMin/,
    ],
    ['the same name twice', 'scenarios:\n  - name: A\n  - name: A\n', /line 3, .*name of its own/],
    ['seven scenarios', `scenarios:\n${'  - name: A\n'.repeat(7)}`, /field scenarios/],
    ['no scenario', 'scenarios: []\n', /field scenarios/],
    ['nothing at all', '', /month\.yaml/],
    ['no YAML', 'scenarios: [', /line 1/],
  ])('%s', (_, text, words) => {
    const found = refusals(text);
    expect(found.length).toBeGreaterThan(0);
    expect(found.some((line) => words.test(line))).toBe(true);
  });

  it('a scanner nobody has is told once, not again as no scanner at all', () => {
    expect(refusals('scenarios:\n  - name: A\n    scanners: [mr9]\n')).toHaveLength(1);
  });

  it('every problem has value, limit and way out', () => {
    const outcome = read('requestsPerDay: -4\nscenarios:\n  - { name: A, lateShare: 11 }\n');
    expect(outcome.kind).toBe('refused');
    if (outcome.kind !== 'refused') return;
    for (const problem of outcome.problems)
      for (const part of [problem.thing, problem.value, problem.limit, problem.wayOut])
        expect(part).not.toBe('');
  });
});

describe('whatever is in the file', () => {
  const never = (text: string) => {
    const outcome = read(text);
    if (outcome.kind === 'refused') expect(outcome.problems.length).toBeGreaterThan(0);
    else expect(outcome.value.length).toBeGreaterThan(0);
  };

  it('any text: read or refused with problems, never thrown', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary', maxLength: 400 }), never), { numRuns: 300 });
  });

  it('any JSON', () => {
    fc.assert(
      fc.property(fc.json(), (json) => {
        never(json);
        never(`scenarios:\n  - ${json}`);
      }),
      { numRuns: 300 },
    );
  });

  it('any value in any known field', () => {
    const field = fc.constantFrom(...Object.keys(usual), 'examShares', 'groupShares');
    fc.assert(
      fc.property(field, fc.jsonValue(), fc.boolean(), (name, value, atTop) => {
        const own = atTop ? {} : { [name]: value };
        never(
          JSON.stringify({
            ...(atTop ? { [name]: value } : {}),
            scenarios: [{ name: 'A', ...own }],
          }),
        );
      }),
      { numRuns: 600 },
    );
  });

  it('the shipped file with a piece torn out', () => {
    const text = readText(join(demoFolder, 'scenarios.yaml'));
    const at = fc.nat({ max: text.length });
    fc.assert(
      fc.property(at, at, (from, to) => never(text.slice(0, from) + text.slice(to))),
      { numRuns: 300 },
    );
  });

  it('aliases without end', () => {
    const lines = Array.from({ length: 30 }, (_, n) =>
      n === 0 ? 'a0: &a0 [x, x, x]' : `a${n}: &a${n} [*a${n - 1}, *a${n - 1}, *a${n - 1}]`,
    );
    expect(refusals(`${lines.join('\n')}\nscenarios:\n  - name: A\n`).length).toBeGreaterThan(0);
  });
});
