#!/usr/bin/env node
import { Command, CommanderError } from 'commander';
import { ProblemError } from '../shared/index.js';
import { addCurveCommand } from './commands/curve.js';
import { addFillCommand } from './commands/fill.js';
import { addLearnedCommand } from './commands/learned.js';
import { addLibraryCommand } from './commands/library.js';
import { addMendCommand } from './commands/mend.js';
import { addMonthCommand } from './commands/month.js';
import { addPhysicsCommands } from './commands/physics.js';
import { addPlanCommand } from './commands/plan.js';
import { addSequenceCommand } from './commands/sequence.js';
import { addSlotsCommand } from './commands/slots.js';
import { exitCodeHelp, exitCodes, printProblems } from './output.js';

const program = new Command('stillspan')
  .description(
    'Plans MRI exams that fit the slot and what the patient can bear, and says what each\n' +
      'answer is worth. It books and explains; it drives no scanner, reads no image, clears\n' +
      'nobody for the magnet and doses nothing.',
  )
  .addHelpText('after', exitCodeHelp)
  .showHelpAfterError('(add --help to see how)')
  .exitOverride();

addPlanCommand(program);
addCurveCommand(program);
addFillCommand(program);
addMendCommand(program);
addMonthCommand(program);
addLearnedCommand(program);
addSequenceCommand(program);
addSlotsCommand(program);
addLibraryCommand(program);
addPhysicsCommands(program);

try {
  await program.parseAsync();
} catch (error) {
  if (error instanceof CommanderError) {
    process.exitCode = error.exitCode === 0 ? exitCodes.ok : exitCodes.usage;
  } else if (error instanceof ProblemError) {
    printProblems([error.problem]);
    process.exitCode = exitCodes.nothing;
  } else {
    throw error;
  }
}
