import { join } from 'node:path';
import { demoFolder, readLibraryFiles, shippedLibraryFolder } from '../../src/cli/files.js';
import { openDepartment, openGround, openRequests } from '../../src/cli/ground.js';
import { planRequests } from '../../src/cli/plan-requests.js';
import { readLibrary } from '../../src/interchange/index.js';
import {
  bestScanner,
  checkLibrary,
  linearSolver,
  planExam,
  prepare,
} from '../../src/planning/index.js';
import { highsChoice, loadHighsOnce } from '../oracles/highs-choice.js';
import type { BenchCase } from './run.js';

/** The demo department's own requests, planned with curve and reasons; the reference is HiGHS on the bare choice. */
export const cases = async (): Promise<BenchCase[]> => {
  const highs = await loadHighsOnce();
  const { ground } = openGround();
  const department = openDepartment();
  const { requests } = openRequests(join(demoFolder, 'requests.csv'));
  const solver = linearSolver({ wallClockMs: 150 });
  const placed = requests.map(({ request, booking }) => {
    const scanner =
      department.scanners.find((s) => s.id === booking?.scannerId) ??
      bestScanner(request, department.scanners, ground)!;
    const ready = prepare(request, scanner, ground);
    if (ready.kind === 'refused') throw new Error(JSON.stringify(ready.problems));
    return { request, scanner, problem: ready.value.problem };
  });
  let next = 0;
  let nextChoice = 0;
  return [
    {
      name: 'one exam of the demo, planned with curve, reasons and lifts, against HiGHS on one choice',
      rounds: placed.length,
      subject: () => {
        const { request, scanner } = placed[next++ % placed.length]!;
        return planExam(request, scanner, ground, { solver, otherScanners: department.scanners });
      },
      reference: () => highsChoice(highs, placed[nextChoice++ % placed.length]!.problem),
      limitMs: 50,
      worstMs: 200,
    },
    {
      name: "the demo's two days planned",
      subject: () => planRequests(requests, department, ground, solver),
      limitMs: 5_000,
    },
    {
      name: 'the whole library read and assessed at both fields, cold',
      subject: () => {
        const { library } = readLibrary(readLibraryFiles(shippedLibraryFolder));
        return library === undefined ? undefined : checkLibrary(library);
      },
      limitMs: 2_000,
    },
  ];
};
