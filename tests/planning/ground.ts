import type { Exam, SiteLibrary, SitePolicy } from '../../src/exams/index.js';
import { readLibrary } from '../../src/interchange/index.js';
import { openEvidence, type ExamRequest, type PlanningGround } from '../../src/planning/index.js';
import type { ScannerAbilities } from '../../src/sequences/index.js';
import type { ToleranceStatement } from '../../src/tolerance/index.js';
import { readLibraryFiles, shippedLibraryFolder } from '../../src/cli/files.js';

const loaded = readLibrary(readLibraryFiles(shippedLibraryFolder));
if (loaded.library === undefined) throw new Error(JSON.stringify(loaded.problems.slice(0, 3)));

/** The library that ships, as every planning test uses it. */
export const shipped: SiteLibrary = loaded.library;
export const shippedProblems = loaded.problems;
export const ground: PlanningGround = { library: shipped, evidence: openEvidence(shipped) };

export const allCoils = ['head', 'head-neck', 'spine', 'knee', 'shoulder', 'body'];
export const at3: ScannerAbilities = {
  id: 'S3',
  name: 'Test 3 T',
  fieldT: 3,
  boreCm: 60,
  coils: allCoils,
};
export const at15: ScannerAbilities = {
  id: 'S15',
  name: 'Test 1.5 T',
  fieldT: 1.5,
  boreCm: 60,
  coils: allCoils,
};

/** A calm adult who was asked everything. */
export const calm: ToleranceStatement = {
  still: { kind: 'stated', seconds: 2400 },
  hold: { kind: 'stated', seconds: 20 },
  stay: { kind: 'stated', seconds: 5400 },
  saidBy: 'patient',
  followsInstructions: 'yes',
  conditions: [],
  patientClass: 'outpatient',
  ageYears: 45,
};

export function requestFor(examId: string, given: Partial<ExamRequest> = {}): ExamRequest {
  return {
    id: 'T-1',
    examId,
    questionIds: [],
    priority: 'routine',
    canCome: { partOfDay: 'any' },
    tolerance: calm,
    contrast: 'approved',
    safetyScreening: 'done by site',
    transport: 'walking',
    escort: false,
    slotS: 1800,
    ...given,
  };
}

export function examNamed(id: string): Exam {
  const exam = shipped.exams.get(id);
  if (exam === undefined) throw new Error(`no exam ${id}`);
  return exam;
}

/** The same library under another policy, with evidence of its own. */
export function under(policy: SitePolicy): PlanningGround {
  const library = { ...shipped, policy };
  return { library, evidence: openEvidence(library) };
}
