import { execFile } from 'node:child_process';
import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

const root = fileURLToPath(new URL('../../', import.meta.url));
const folder = mkdtempSync(join(tmpdir(), 'stillspan-cli-'));

interface Ran {
  readonly code: number;
  readonly out: string;
  readonly err: string;
}

/** The command line as a process of its own, as a user starts it. */
function stillspan(
  args: readonly string[],
  input = '',
  env: Record<string, string> = {},
): Promise<Ran> {
  return new Promise((resolve) => {
    const child = execFile(
      process.execPath,
      ['--import', 'tsx', 'src/cli/stillspan.ts', ...args],
      { cwd: root, env: { ...process.env, ...env }, maxBuffer: 64e6 },
      (error, out, err) =>
        resolve({ code: typeof error?.code === 'number' ? error.code : error ? 1 : 0, out, err }),
    );
    child.stdin?.end(input);
  });
}

function file(name: string, text: string): string {
  const path = join(folder, name);
  writeFileSync(path, text);
  return path;
}

/** Every object that holds a grade below diagnostic must hold its words too. */
function unspokenGrades(value: unknown, at = '$'): string[] {
  if (value === null || typeof value !== 'object') return [];
  const found = Object.values(value).filter((v) => v === 'screening' || v === 'targeted');
  const words = (value as { words?: unknown }).words;
  const said = typeof words === 'string' && /not diagnostic|this question only/.test(words);
  return [
    ...(found.length > 0 && !Array.isArray(value) && !said ? [at] : []),
    ...Object.entries(value).flatMap(([key, v]) => unspokenGrades(v, `${at}.${key}`)),
  ];
}

describe('help', () => {
  it('teaches: what it is, what it is not, every command with an example', async () => {
    const { code, out } = await stillspan(['--help']);
    expect(code).toBe(0);
    expect(out).toContain('clears\nnobody for the magnet');
    for (const command of [
      'plan',
      'curve',
      'sequence',
      'library',
      'echoes',
      'scan-time',
      'contrast',
    ])
      expect(out).toContain(command);
    expect((await stillspan(['plan', '--help'])).out).toContain('data-demo/requests.csv');
  });
  it('a command nobody knows is exit code 2', async () => {
    const { code, err } = await stillspan(['plna']);
    expect(code).toBe(2);
    expect(err).toContain('plan');
  });
});

describe('plan', () => {
  it('plans the demo department whole, in 80 columns, without colour when asked', async () => {
    const { code, out } = await stillspan(['plan', 'data-demo/requests.csv'], '', {
      NO_COLOR: '1',
    });
    expect(code).toBe(0);
    expect(out.match(/^R-\d+ /gm)?.length).toBeGreaterThanOrEqual(60);
    expect(Math.max(...out.split('\n').map((l) => l.length))).toBeLessThanOrEqual(80);
    expect(out).not.toContain('\u001b[');
  });
  it('never prints a grade below diagnostic without its words', async () => {
    const { out } = await stillspan(['plan', 'data-demo/requests.csv'], '', { NO_COLOR: '1' });
    const text = out.replace(/\s+/g, ' ');
    expect(text).toContain('screening-grade, not diagnostic');
    expect(text.match(/screening-grade/g)?.length).toBe(
      text.match(/screening-grade, not diagnostic/g)?.length,
    );
    expect(text.match(/\[T\]/g)?.length).toBeGreaterThan(0);
    for (const [line] of text.matchAll(/\[T\] [^[]*/g))
      expect(line).toContain('this question only');
  });
  it('nor writes one into JSON without them', async () => {
    const { out } = await stillspan(['plan', 'data-demo/requests.csv', '--json']);
    const parsed = JSON.parse(out) as { plans: unknown[] };
    expect(parsed.plans.length).toBeGreaterThanOrEqual(60);
    expect(out).toContain('"screening"');
    expect(unspokenGrades(parsed)).toEqual([]);
  });
  it('plans the good rows, names the bad ones on standard error, exit code 3', async () => {
    const path = file(
      'mixed.csv',
      'request_id,exam,slot,still_for,said_by\nA-1,knee,30 min,,\nA-2,elbow,30 min,,\nA-3,knee,30,,\n',
    );
    const { code, out, err } = await stillspan(['plan', path], '', { NO_COLOR: '1' });
    expect(code).toBe(3);
    expect(out).toContain('A-1  Knee');
    expect(err.replace(/\s+/g, ' ')).toContain('request A-2, field exam: "elbow"; known exams:');
    expect(err.replace(/\s+/g, ' ')).toContain('row 4, field slot: "30";');
  });
  it('a file that is not there is exit code 4 and a sentence', async () => {
    const { code, err } = await stillspan(['plan', 'nowhere.csv']);
    expect(code).toBe(4);
    expect(err).toContain('nowhere.csv');
    expect(err).not.toContain('    at ');
  });
});

describe('numbers in, JSON out', () => {
  it('echoes: the relaxed 120-degree train of the checks', async () => {
    // Checks (physics), section 2.
    const { code, out } = await stillspan([
      'echoes',
      '--t1',
      '1084',
      '--t2',
      '69',
      '--spacing',
      '10',
      '--angle',
      '120',
      '--count',
      '4',
    ]);
    expect(code).toBe(0);
    const { echoes } = JSON.parse(out) as { echoes: number[] };
    [0.64881, 0.74239, 0.56133, 0.52291].forEach((v, n) =>
      expect(Math.abs((echoes[n] ?? 0) - v)).toBeLessThan(6e-6),
    );
  });
  it('echoes in the steady state with an inversion near the null are weak', async () => {
    const { out } = await stillspan([
      'echoes',
      '--t1',
      '4300',
      '--t2',
      '1900',
      '--spacing',
      '10',
      '--angle',
      '180',
      '--count',
      '20',
      '--tr',
      '9000',
      '--ti',
      '2458.1',
    ]);
    expect(Math.abs((JSON.parse(out) as { echoes: number[] }).echoes[0] ?? 1)).toBeLessThan(0.002);
  });
  it('scan-time reads a sequence from standard input', async () => {
    // 64 x 3 averages at TR 450 and 224 lines: 302.4 s, worked text example, checks section 3.
    const sequence = {
      fieldT: 1.5,
      family: 'spin-echo',
      repetitionTimeMs: 450,
      echoTimeMs: 15,
      matrixFrequency: 256,
      matrixPhase: 224,
      fovFrequencyMm: 240,
      fovPhaseMm: 240,
      slices: 10,
      sliceThicknessMm: 5,
      readoutMs: 5,
      averages: 3,
      startUpRepeats: 0,
    };
    const { code, out } = await stillspan(['scan-time', '-'], JSON.stringify(sequence));
    expect(code).toBe(0);
    expect((JSON.parse(out) as { acquisitionS: number }).acquisitionS).toBeCloseTo(302.4, 6);
  });
  it('contrast: blur in pixels and border of fluid in a single-shot', async () => {
    const { out } = await stillspan([
      'contrast',
      'head-ax-t2-ss-half',
      '--tissue',
      'csf',
      '--background',
      'white matter',
      '--border',
      '--size',
      '2',
    ]);
    const shown = JSON.parse(out) as { blurPixels: Record<string, number>; borderWidthMm: number };
    expect(shown.blurPixels['csf']).toBeLessThan(1.4);
    expect(shown.blurPixels['white matter']).toBeGreaterThan(2.5);
    expect(shown.borderWidthMm).toBeLessThan(2);
  });
  it.each([
    [['echoes', '--t1', '-5', '--t2', '69', '--spacing', '10', '--angle', '120'], 2],
    [['scan-time', '-'], 4],
    [['contrast', 'no-such-sequence', '--tissue', 'csf', '--background', 'fat'], 4],
    [['contrast', 'head-ax-t2-fse', '--tissue', 'marzipan', '--background', 'csf'], 4],
    [['sequence', 'head-ax-t2-fse', '--field', '7'], 2],
  ])('%j is refused with a sentence, exit code %d', async (args, expected) => {
    const { code, err } = await stillspan(args as string[], '{"family":');
    expect(code).toBe(expected);
    expect(err.length).toBeGreaterThan(10);
    expect(err).not.toContain('    at ');
  });
});

describe('curve and library', () => {
  it('curve: the marks are explained in words, the slots rise', async () => {
    const { code, out } = await stillspan(['curve', 'data-demo/requests.csv', 'R-102'], '', {
      NO_COLOR: '1',
    });
    expect(code).toBe(0);
    expect(out).toContain("10'");
    expect(Math.max(...out.split('\n').map((l) => l.length))).toBeLessThanOrEqual(80);
  });
  it('library list as JSON says the words beside every capped rule', async () => {
    const { out } = await stillspan(['library', 'list', '--json']);
    expect(unspokenGrades(JSON.parse(out))).toEqual([]);
  });
  it('library check is clean', async () => {
    const { code, out } = await stillspan(['library', 'check']);
    expect(code).toBe(0);
    expect(out).toContain('0 fault(s)');
  });
});
