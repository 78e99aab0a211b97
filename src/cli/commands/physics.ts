import { InvalidArgumentError, type Command } from 'commander';
import {
  echoAmplitudes,
  steadyStateEchoes,
  spreadWidthMm,
  tissueAt,
  type FieldT,
} from '../../physics/index.js';
import {
  assess,
  effectiveEchoTimeMs,
  lineSignal,
  scanTime,
  untroubledBreathing,
  voxelOf,
} from '../../sequences/index.js';
import { exitCodes, printJson } from '../output.js';
import { findSequence, readField, readPositive } from './sequence.js';

interface EchoFlags {
  readonly t1: number;
  readonly t2: number;
  readonly spacing: number;
  readonly angle: number[];
  readonly count?: number;
  readonly excitation: number;
  readonly b1: number;
  readonly tr?: number;
  readonly ti?: number;
}

/** Raw-number commands that print JSON, so that the physics can be checked without reading code. */
export function addPhysicsCommands(program: Command): void {
  program
    .command('echoes')
    .summary('echo amplitudes of a refocused train, as JSON')
    .description(
      'Extended phase graph of a CPMG train (Hennig 1988; Weigel 2015), for unit\nlongitudinal magnetisation; with --tr the steady state over repeats, with --ti an\ninversion before each excitation.',
    )
    .requiredOption('--t1 <ms>', 'T1', readPositive)
    .requiredOption('--t2 <ms>', 'T2', readPositive)
    .requiredOption('--spacing <ms>', 'echo spacing', readPositive)
    .requiredOption(
      '--angle <deg>',
      'refocusing angle, or a comma-separated list whose last is repeated',
      readAngles,
    )
    .option('--count <n>', 'number of echoes (default: length of the list)', readCount)
    .option('--excitation <deg>', 'excitation angle', readPositive, 90)
    .option('--b1 <scale>', 'scale of every pulse', readPositive, 1)
    .option('--tr <ms>', 'repetition time', readPositive)
    .option('--ti <ms>', 'inversion time (needs --tr)', readPositive)
    .addHelpText(
      'after',
      '\nExample:\n  echoes --t1 1084 --t2 69 --spacing 10 --angle 120 --count 12',
    )
    .action((flags: EchoFlags) => showEchoes(flags));

  program
    .command('scan-time')
    .summary('scan time and still intervals of a sequence given as JSON, as JSON')
    .argument('<file>', '.json file, or - for standard input; library field names with "fieldT"')
    .option('--hold <s>', 'breath-hold span', readPositive, untroubledBreathing.ability.holdSpanS)
    .option(
      '--breaths <per-minute>',
      'respiratory rate',
      readPositive,
      untroubledBreathing.ability.breathsPerMinute,
    )
    .addHelpText(
      'after',
      '\nExample (0.5 s a slice):\n  echo \'{"fieldT":3,"family":"single-shot","repetitionTimeMs":500,"echoTimeMs":90,\n  "echoSpacingMs":4,"matrixFrequency":256,"matrixPhase":256,"fovFrequencyMm":240,\n  "fovPhaseMm":240,"slices":20,"sliceThicknessMm":5,"readoutMs":2,\n  "partialFourier":0.5625}\' | stillspan scan-time -',
    )
    .action((file: string, flags: { hold: number; breaths: number }) => {
      const sequence = findSequence(file, 3);
      const time = scanTime(sequence, {
        ...untroubledBreathing,
        ability: { holdSpanS: flags.hold, breathsPerMinute: flags.breaths },
      });
      printJson({ ...time, effectiveEchoTimeMs: effectiveEchoTimeMs(sequence) });
      if (time.kind === 'impossible') process.exitCode = exitCodes.nothing;
    });

  program
    .command('contrast')
    .summary('blur, border and contrast of a target in a sequence, as JSON')
    .argument('<sequence>', 'sequence id of the library, or a .json file')
    .requiredOption('--tissue <name>', 'what is looked for')
    .requiredOption('--background <name>', 'what it lies in')
    .option('--size <mm>', 'diameter', readPositive, 4)
    .option('--border', 'the target is the border between the two')
    .option('--field <tesla>', '1.5 or 3', readField, 3)
    .addHelpText(
      'after',
      '\nExample:\n  contrast head-ax-t2-ss-half --tissue csf --background "white matter" --border --size 2',
    )
    .action(
      (
        name: string,
        flags: { tissue: string; background: string; size: number; border?: true; field: FieldT },
      ) => {
        const sequence = findSequence(name, flags.field);
        const kind = flags.border === true ? 'border' : 'lesion';
        const { tissue, background, size: sizeMm } = flags;
        printJson({
          sequence: sequence.id,
          fieldT: sequence.fieldT,
          ...assess(sequence, { kind, tissue, background, sizeMm }),
          blurPixels: Object.fromEntries(
            [tissue, background].map((t) => {
              const signal = lineSignal(sequence, tissueAt(t, sequence.fieldT));
              return [t, signal.kind === 'computed' ? spreadWidthMm(signal.weights, 1) : null];
            }),
          ),
          pixel: voxelOf(sequence),
        });
      },
    );
}

function showEchoes(flags: EchoFlags): void {
  const count = flags.count ?? flags.angle.length;
  const last = flags.angle[flags.angle.length - 1] ?? 180;
  const train = {
    t1Ms: flags.t1,
    t2Ms: flags.t2,
    echoSpacingMs: flags.spacing,
    refocusingDeg: Array.from({ length: count }, (_, n) => flags.angle[n] ?? last),
    excitationDeg: flags.excitation,
    b1Scale: flags.b1,
  };
  if (flags.tr === undefined) {
    printJson({ echoes: echoAmplitudes(train) });
    return;
  }
  printJson(
    steadyStateEchoes(train, {
      repetitionTimeMs: flags.tr,
      ...(flags.ti === undefined ? {} : { inversion: { inversionTimeMs: flags.ti } }),
    }),
  );
}

function readAngles(text: string): number[] {
  const angles = text.split(',').map(Number);
  if (angles.some((a) => !Number.isFinite(a)))
    throw new InvalidArgumentError('It must be degrees, separated by commas.');
  return angles;
}

function readCount(text: string): number {
  const value = Number(text);
  if (!Number.isInteger(value) || value < 1 || value > 4096)
    throw new InvalidArgumentError('It must be a whole number, 1 to 4096.');
  return value;
}
