import { execFile } from 'node:child_process';
import { promisify } from 'node:util';
import { afterAll, describe, expect, it } from 'vitest';
import { compiled } from '../../src/planning/solver/compiled.js';
import { chooseExactly } from '../../src/planning/solver/exact.js';
import { linearChoice } from '../../src/planning/solver/linear-rounds.js';
import {
  programmeThread,
  type Programme,
  type ProgrammeAnswer,
  type ProgrammeThread,
} from '../../src/planning/solver/linear-worker.js';
import { linearSolver } from '../../src/planning/solver/linear.js';
import { inventedExam } from './instances.js';

const exam = inventedExam(1007, { views: 8, candidates: 5, questions: 4 });
const real = programmeThread();
afterAll(() => real.close());

/** A thread whose answers are spoiled on the way. */
const spoiled = (
  how: (answer: ProgrammeAnswer, programme: Programme) => ProgrammeAnswer,
): ProgrammeThread => ({
  solve: async (programme, limitMs) => how(await real.solve(programme, limitMs), programme),
  close: () => Promise.resolve(),
});
const valuesOf = (answer: ProgrammeAnswer): Float64Array => {
  if (answer.kind !== 'solved') throw new Error('expected an answer to spoil');
  return answer.values.slice();
};

describe('guards around the linear programme', () => {
  // Source: known weaknesses of the library, measured beforehand; each is made to happen here.
  it.each<[string, RegExp, (a: ProgrammeAnswer, p: Programme) => ProgrammeAnswer]>([
    [
      'says infeasible',
      /choosing nothing/,
      (a) => ({ kind: 'solved', feasible: false, values: valuesOf(a) }),
    ],
    [
      'returns fractions at a timeout and calls them feasible',
      /came out as 0\.5/,
      (a) => ({
        kind: 'solved',
        feasible: true,
        values: valuesOf(a).map((v, j) => (j === 0 ? 0.5 : v)),
      }),
    ],
    [
      'breaks a row',
      /a row of/,
      (a, p) => ({
        kind: 'solved',
        feasible: true,
        values: valuesOf(a).map((v, j) => (j < p.wholes ? 1 : v)),
      }),
    ],
    [
      'returns something that is not a number',
      /NaN/,
      (a) => ({ kind: 'solved', feasible: true, values: valuesOf(a).fill(NaN) }),
    ],
    [
      'claims a grade that its picks do not give',
      /claims/,
      (a, p) => ({
        kind: 'solved',
        feasible: true,
        // Grades without picks break a row; picks without their grades only the claim.
        values: valuesOf(a).map((v, j) => (j >= p.wholes && p.goal[j]! > 50 ? 0 : v)),
      }),
    ],
    ['fails', /out of order/, () => ({ kind: 'failed', why: 'out of order' })],
    ['runs out of time', /time ran out/, () => ({ kind: 'out-of-time' })],
  ])('gives up when it %s', async (_, why, how) => {
    const outcome = await linearChoice(compiled(exam), spoiled(how), 5_000);
    expect(outcome.kind).toBe('given-up');
    if (outcome.kind === 'given-up') expect(outcome.why).toMatch(why);
  });

  // Source: the exact search.
  it('lets the exact search stand in when the wall clock ends the thread, then starts afresh', async () => {
    const impatient = linearSolver({ wallClockMs: 0.001 });
    const choice = await impatient.choose(exam);
    expect(choice.provedBy).toMatch(/exact branch and bound.*standing in.*time ran out/);
    expect(choice.objective).toEqual(chooseExactly(exam).objective);
    await impatient.close();

    const thread = programmeThread();
    const large = bigProgramme();
    const beganMs = performance.now();
    expect((await thread.solve(large, 80)).kind).toBe('out-of-time');
    expect(performance.now() - beganMs).toBeLessThan(2_000);
    const small = { columns: 1, wholes: 1, goal: [1], rows: [{ most: 2.5, at: [0], values: [1] }] };
    const answer = await thread.solve(small, 5_000);
    expect(answer).toMatchObject({ kind: 'solved', feasible: true });
    expect(valuesOf(answer)[0]).toBe(2);
    await thread.close();
  });

  // Source: house rule that an idle thread keeps no process alive.
  it('lets a process end that never closed it', async () => {
    const at = (path: string) => new URL(`../../${path}`, import.meta.url).href;
    const script = `
      const { linearSolver } = await import('${at('src/planning/solver/linear.ts')}');
      const { inventedExam } = await import('${at('tests/planning/instances.ts')}');
      const exam = inventedExam(3, { views: 4, candidates: 3, questions: 3 });
      process.stdout.write((await linearSolver({ wallClockMs: 10000 }).choose(exam)).provedBy);`;
    const { stdout } = await promisify(execFile)(
      process.execPath,
      ['--import', 'tsx', '--input-type=module', '-e', script],
      { timeout: 30_000 },
    );
    expect(stdout).toMatch(/^linear programme/);
  });

  it('answers calls made at the same time, and again after it was closed', async () => {
    const solver = linearSolver({ wallClockMs: 10_000 });
    const exams = [1, 2, 3, 4, 5].map((i) =>
      inventedExam(1100 + i, { views: 6, candidates: 4, questions: 3 }),
    );
    const together = await Promise.all(exams.map((problem) => solver.choose(problem)));
    exams.forEach((problem, i) =>
      expect(together[i]!.objective).toEqual(chooseExactly(problem).objective),
    );
    await solver.close();
    expect((await solver.choose(exam)).provedBy).toMatch(/^linear programme/);
    await solver.close();
  });
});

/** A knapsack with equal odd weights and an even limit: its tree has no early end for plain branching. */
function bigProgramme(): Programme {
  const columns = 41;
  const at = Array.from({ length: columns }, (_, j) => j);
  const rows = at.map((j) => ({ most: 1, at: [j], values: [1] }));
  rows.push({ most: 41, at, values: at.map(() => 2) });
  return { columns, wholes: columns, goal: at.map(() => 1), rows };
}
