import type { Command } from 'commander';
import { checkLibrary } from '../../planning/index.js';
import { openGround } from '../ground.js';
import { readLibraryFiles, shippedLibraryFolder } from '../files.js';
import { readLibrary } from '../../interchange/index.js';
import { exitCodes, print, printJson, printProblems } from '../output.js';
import { fitted, minSec, wrapped } from '../text/layout.js';

interface LibraryFlags {
  readonly library?: string;
  readonly json?: true;
}

/** `library list` and `library check`. */
export function addLibraryCommand(program: Command): void {
  const library = program.command('library').summary('list or check the site library');
  library
    .command('list')
    .summary('exams with their questions and views, and how many sequences')
    .option('--library <folder>', 'site library (default: the one that ships)')
    .option('--json', 'as JSON')
    .action((flags: LibraryFlags) => listLibrary(flags));
  library
    .command('check')
    .summary('validate every file and hold the library against what a department would recognise')
    .option('--library <folder>', 'site library (default: the one that ships)')
    .option('--json', 'as JSON')
    .action((flags: LibraryFlags) => checkFiles(flags));
}

function listLibrary(flags: LibraryFlags): void {
  const { ground, problems } = openGround(flags.library);
  const { library } = ground;
  const exams = [...library.exams.values()];
  if (flags.json === true) {
    printJson({
      exams,
      sequences: [...library.sequences.values()].flatMap((fields) => [...fields.values()]),
      policy: library.policy,
      problems,
    });
    return;
  }
  print(
    `${exams.length} exams, ${library.sequences.size} sequences; policy of ${library.policy.site}, signed ${library.policy.signedOn}\n`,
  );
  for (const exam of exams) {
    print(`${exam.id}  ${exam.name} (${exam.coil} coil)`);
    print(
      wrapped(
        exam.questions.map((q) => `${q.id}: ${q.name}`).join('; '),
        '   asks   ',
        '          ',
      ),
    );
    print(
      wrapped(
        exam.views.map((v) => `${v.name} (${v.candidates.length})`).join('; '),
        '   views  ',
        '          ',
      ),
    );
  }
  printProblems(problems);
}

function checkFiles(flags: LibraryFlags): void {
  const folder = flags.library ?? shippedLibraryFolder;
  const { library, problems } = readLibrary(readLibraryFiles(folder));
  const report = library === undefined ? undefined : checkLibrary(library);
  const all = [...problems, ...(report?.problems ?? [])];
  if (flags.json === true) printJson({ ...report, problems: all });
  else if (report !== undefined) {
    print(`${fitted('Full-quality exam', 34)}  field  sequences  acquisition  table time`);
    for (const row of report.exams) {
      print(
        `${fitted(row.name, 34)}  ${String(row.fieldT).padStart(3)} T  ${String(row.sequences).padStart(9)}  ${minSec(row.acquisitionS).padStart(11)}  ${minSec(row.tableTimeS).padStart(10)}`,
      );
    }
    print(
      `\n${library?.sequences.size ?? 0} sequences and ${report.assessed} sequence-target pairs looked at; ${all.length} fault(s).`,
    );
  }
  if (flags.json !== true) printProblems(all);
  process.exitCode =
    all.length === 0 ? exitCodes.ok : library === undefined ? exitCodes.nothing : exitCodes.partly;
}
