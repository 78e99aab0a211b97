import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { fillFile } from '../../src/cli/commands/fill.js';
import { demoFolder } from '../../src/cli/files.js';

const demo = join(demoFolder, 'requests.csv');

function printed(run: () => number): { readonly code: number; readonly text: string } {
  let text = '';
  const spy = vi.spyOn(process.stdout, 'write').mockImplementation((chunk) => {
    text += String(chunk);
    return true;
  });
  const code = run();
  spy.mockRestore();
  return { code, text };
}
afterEach(() => vi.restoreAllMocks());

describe('the fill command', () => {
  // Source: common practice, no source (80-column terminals); the words beside a grade are a rule of the house.
  it('proposes the demo requests that wait in 80 columns, low grades with their words, and books nothing', () => {
    const before = readFileSync(demo, 'utf8');
    const { code, text } = printed(() => fillFile(demo, { iterations: '60', full: true }));
    expect(code).toBe(0);
    expect(readFileSync(demo, 'utf8')).toBe(before);
    const plain = text.replace(/\u001b\[\d+m/g, '');
    for (const line of plain.split('\n')) expect(line.length).toBeLessThanOrEqual(80);
    expect(plain).toMatch(/9 of 9 placed/);
    expect(plain).toMatch(/nothing is booked/);
    const flat = plain.replace(/\s+/g, ' ');
    const low = flat.match(/: (screening|targeted)[^;(]*/g) ?? [];
    expect(low.length).toBeGreaterThan(0);
    for (const part of low) expect(part).toMatch(/not diagnostic/);
  });

  // Source: holds for any right planner: the same as JSON, and the same budget gives the same answer.
  it('gives JSON that repeats', () => {
    const run = () => printed(() => fillFile(demo, { iterations: '40', json: true })).text;
    const first = run();
    const { proposal } = JSON.parse(first) as {
      proposal: { placements: unknown[]; bound: { diagnostic: number } };
    };
    expect(proposal.placements).toHaveLength(9);
    expect(run()).toBe(first);
  });

  // Source: common practice, no source (usage errors have their own exit code).
  it('refuses a budget that is no number', () => {
    vi.spyOn(process.stderr, 'write').mockReturnValue(true);
    expect(printed(() => fillFile(demo, { iterations: 'many' })).code).toBe(2);
  });
});
