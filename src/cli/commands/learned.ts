import type { Command } from 'commander';
import { learn } from '../../tolerance/index.js';
import { openGround } from '../ground.js';
import { exitCodes, print, printJson, printProblems } from '../output.js';
import { defaultStoreFile, recordsIn } from '../own-records.js';
import { learnedCsv, learnedJson, learnedText } from '../text/learned-text.js';

interface LearnedFlags {
  readonly file: string;
  readonly library?: string;
  readonly json?: true;
  readonly csv?: true;
}

/** `learned`: what patients achieved, against what the policy counts on. */
export function addLearnedCommand(program: Command): void {
  program
    .command('learned')
    .summary('what patients achieved, against what plans count on')
    .description(
      'Reads the records that done exams left in the store and holds them against every\n' +
        'figure of the policy that they bear on: how many, how long, with 95 % limits. Changes\n' +
        'nothing: a figure gives way only to a signed entry in policy.yaml.',
    )
    .option('--file <store>', 'file of the store', defaultStoreFile)
    .option('--library <folder>', 'site library (default: the one that ships)')
    .option('--json', 'everything as JSON, curves too')
    .option('--csv', 'one row a figure')
    .addHelpText('after', '\nExamples:\n  learned\n  learned --file .data/stillspan.sqlite --csv')
    .action(async (flags: LearnedFlags) => {
      process.exitCode = await learnedFrom(flags);
    });
}

/** Prints what was learned from a store file; returns the exit code. */
export async function learnedFrom(flags: LearnedFlags): Promise<number> {
  const records = await recordsIn(flags.file);
  if (records === undefined) {
    printProblems([
      {
        code: 'store-file',
        thing: 'option --file',
        value: flags.file,
        limit: 'a file that the pages have kept',
        wayOut: 'Check the path, or start the pages once; they make the file.',
      },
    ]);
    return exitCodes.nothing;
  }
  const { ground, problems } = openGround(flags.library);
  const learned = learn(records, ground.library.policy);
  if (flags.json === true) printJson(learnedJson(learned));
  else print(flags.csv === true ? learnedCsv(learned) : learnedText(learned));
  printProblems(problems);
  return problems.length === 0 ? exitCodes.ok : exitCodes.partly;
}
