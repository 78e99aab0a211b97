import { beforeAll, describe, expect, it } from 'vitest';
import { measureWords } from '../../src/throughput/index.js';
import { compiledCli, type Ran } from './compiled-cli.js';
import { few, file, joined, unspoken } from './month-files.js';

const measures = Object.values(measureWords);

let stillspan: (args: readonly string[]) => Promise<Ran>;
beforeAll(async () => {
  stillspan = await compiledCli();
});

describe('month', () => {
  const names = [
    'Fixed 30 minutes',
    'Slots by tolerance',
    'Slots by tolerance, quick looks allowed',
  ];
  const month = (...args: string[]) =>
    stillspan(['month', '--requests', few, '--months', '3', ...args]);

  it('without a file compares three rules in 80 columns, each figure with limits, each change in words', async () => {
    const { code, out, err } = await month();
    expect(code).toBe(0);
    expect(err).toBe('');
    expect(Math.max(...out.split('\n').map((l) => l.length))).toBeLessThanOrEqual(80);
    names.forEach((name, n) => expect(out).toContain(`\n${n + 1}. ${name}\n`));
    for (const { name } of measures) expect(out.split(name).length).toBeGreaterThan(3);
    expect(out).toContain(
      'Against "Fixed 30 minutes" (+ better, - worse, ~ different, ? undecided)',
    );
    expect(joined(out)).toMatch(/in 60 simulated days: /);
    expect(out).not.toContain('\u001b[');
  });

  it('never speaks of quick looks without saying that they are not diagnostic', async () => {
    for (const flags of [[], ['--csv']]) {
      const { out } = await month(...flags);
      expect(out).toContain('Left with quick looks only (not diagnostic)');
      expect(unspoken(out, [...names].reverse())).toEqual([]);
    }
  });

  it('--csv: one row a scenario and measure, the same figures as --json', async () => {
    const [csv, json] = await Promise.all([month('--csv'), month('--json')]);
    const [head, ...rows] = csv.out.trimEnd().split('\r\n');
    expect(head).toBe(
      'scenario,measure,unit,days,mean,low_95,high_95,difference_from_first,difference_low_95,difference_high_95',
    );
    expect(rows).toHaveLength(3 * measures.length);
    const { scenarios, days, stopped } = JSON.parse(json.out) as {
      days: number;
      stopped: boolean;
      scenarios: {
        name: string;
        estimates: Record<string, { mean: number }>;
        findings: { verdict: string; sentence: string }[];
      }[];
    };
    expect({ days, stopped }).toEqual({ days: 60, stopped: false });
    expect(scenarios.map((s) => s.name)).toEqual(names);
    for (const { name, estimates } of scenarios) {
      const served = rows.find((r) => r.startsWith(`"${name}","Patients served"`));
      expect(Number(served?.split(',').at(-6))).toBeCloseTo(estimates['patientsPerDay']!.mean, 6);
    }
    for (const { sentence } of scenarios.flatMap((s) => s.findings))
      if (/quick look/.test(sentence)) expect(sentence).toContain('not diagnostic');
  });

  it('the same seed gives the same output, on any number of threads; another seed another', async () => {
    const [one, two, other] = await Promise.all([
      month('--seed', '5', '--threads', '1', '--csv'),
      month('--seed', '5', '--threads', '3', '--csv'),
      month('--seed', '6', '--csv'),
    ]);
    expect(one.out).toBe(two.out);
    expect(other.out).not.toBe(one.out);
  });

  it('a scenario file says what differs, and its scenarios are compared in its order', async () => {
    const path = file(
      'two.yaml',
      'daysAMonth: 5\nscenarios:\n  - { name: Thirty, slots: { kind: fixed, minutes: 30 } }\n  - { name: Forty-five, slots: { kind: fixed, minutes: 45 } }\n',
    );
    const { code, out } = await month(path);
    expect(code).toBe(0);
    expect(out).toContain('15 working days each');
    expect(out).toContain('Against "Thirty"');
  });

  it.each([
    [
      'a million months',
      ['--months', '1000000'],
      'field months: 1000000; a whole number from 1 to 500',
    ],
    ['no month', ['--months', '0'], 'field months: 0; a whole number from 1 to 500'],
    ['half a month', ['--months', '0.5'], '"0.5" is not a whole number'],
    ['a seed in words', ['--seed', 'lucky'], '"lucky" is not a whole number'],
  ])('%s is refused once, with exit code 2', async (_, args, words) => {
    const { code, out, err } = await stillspan(['month', '--requests', few, ...args]);
    expect(code).toBe(2);
    expect(out).toBe('');
    expect(joined(err).split(words)).toHaveLength(2);
  });

  it.each([
    ['a file that is not there', 'nowhere.yaml', /nowhere\.yaml/],
    ['no YAML', file('broken.yaml', 'scenarios:\n  - name: "A\n'), /broken\.yaml, line \d+/],
    [
      'a field nobody knows',
      file('field.yaml', 'scenarios:\n  - name: A\n    slotLength: 30\n'),
      /field\.yaml, line \d+, .*slotLength/,
    ],
    [
      'a rate below nothing, one that all share',
      file('rate.yaml', 'months: 2\nrequestsPerDay: -1\nscenarios:\n  - name: A\n'),
      /rate\.yaml, line 2, scenario "A", field requestsPerDay: -1; a number from 0 to 500/,
    ],
    [
      'a scanner nobody has',
      file('scanner.yaml', 'scenarios:\n  - name: A\n    scanners: [mr7]\n'),
      /scanner\.yaml, line 3, scenario "A", field scanners: "mr7"; the department has: mr1/,
    ],
    [
      'requests that are none',
      `--requests=${file('none.csv', 'request_id,exam,slot\n')}`,
      /none\.csv: no request that can be used/,
    ],
  ])('%s is named with line and field, with exit code 4', async (_, path, words) => {
    const { code, out, err } = await stillspan(['month', path]);
    expect(code).toBe(4);
    expect(out).toBe('');
    expect(joined(err)).toMatch(words);
    expect(err).not.toContain('    at ');
  });
});
