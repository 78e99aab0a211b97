import { InvalidArgumentError, type Command } from 'commander';
import { sequenceAt } from '../../exams/index.js';
import { readRawSequence } from '../../interchange/index.js';
import { tissueAt, type FieldT } from '../../physics/index.js';
import {
  assess,
  effectiveEchoTimeMs,
  lineSignal,
  noiseOf,
  rfExposure,
  scanTime,
  trainEchoes,
  untroubledBreathing,
  voxelOf,
  hasEchoTrain,
  type Sequence,
} from '../../sequences/index.js';
import { spreadWidthMm } from '../../physics/index.js';
import { ProblemError } from '../../shared/index.js';
import { readText } from '../files.js';
import { openGround } from '../ground.js';
import { print, printJson } from '../output.js';
import { fitted, minSec, wrapped } from '../text/layout.js';

interface SequenceFlags {
  readonly field: FieldT;
  readonly tissue: string[];
  readonly background?: string;
  readonly size: number;
  readonly border?: true;
  readonly hold: number;
  readonly breaths: number;
  readonly library?: string;
  readonly json?: true;
}

export function readField(text: string): FieldT {
  const value = Number(text);
  if (value !== 1.5 && value !== 3) throw new InvalidArgumentError('It must be 1.5 or 3 (tesla).');
  return value;
}

export function readPositive(text: string): number {
  const value = Number(text);
  if (!Number.isFinite(value) || value <= 0)
    throw new InvalidArgumentError('It must be a number above 0.');
  return value;
}

/** `sequence`: timing, echoes, blur, border and contrast of one sequence. */
export function addSequenceCommand(program: Command): void {
  program
    .command('sequence')
    .summary('timing, echoes, blur, border and contrast of one sequence')
    .description(
      'Works one sequence out: scan time line by line, echo amplitudes, blur per tissue,\nand, with --background, what a target of --size mm in it shows. A sequence is an id of\nthe library or a .json file with the same field names and "fieldT".',
    )
    .argument('<sequence>', 'sequence id, or a .json file')
    .option('--field <tesla>', '1.5 or 3', readField, 3)
    .option('--tissue <name...>', 'tissues to look at', ['white matter', 'csf'])
    .option('--background <name>', 'background of the first tissue')
    .option('--size <mm>', 'target diameter, or caliper width with --border', readPositive, 4)
    .option('--border', 'the target is the border between the two tissues')
    .option('--hold <s>', 'breath-hold span', readPositive, untroubledBreathing.ability.holdSpanS)
    .option(
      '--breaths <per-minute>',
      'respiratory rate',
      readPositive,
      untroubledBreathing.ability.breathsPerMinute,
    )
    .option('--library <folder>', 'site library (default: the one that ships)')
    .option('--json', 'as JSON')
    .addHelpText(
      'after',
      '\nExample:\n  sequence head-ax-t2-ss-half --tissue "oedema-like lesion" "white matter" \\\n    --background "white matter" --size 4',
    )
    .action((name: string, flags: SequenceFlags) => showSequence(name, flags));
}

/** A sequence of the library, or one given as a JSON file. */
export function findSequence(name: string, fieldT: FieldT, folder?: string): Sequence {
  if (name === '-' || name.endsWith('.json')) {
    const text = readText(name);
    const read = readRawSequence(parseJson(text, name));
    if (read.kind === 'ok') return read.value;
    throw new ProblemError(read.problems[0] as (typeof read.problems)[number]);
  }
  const { ground } = openGround(folder);
  const sequence = sequenceAt(ground.library, name, fieldT);
  if (sequence !== undefined) return sequence;
  const known = [...ground.library.sequences.keys()];
  const near = known.filter((id) => id.startsWith(name.split('-')[0] ?? ''));
  throw new ProblemError({
    code: 'sequence-unknown',
    thing: 'sequence',
    value: `"${name}" at ${fieldT} T`,
    limit: `known, for example: ${(near.length > 0 ? near : known).slice(0, 6).join(', ')}`,
    wayOut: 'See "library list --json" for all of them.',
  });
}

function parseJson(text: string, name: string): unknown {
  try {
    return JSON.parse(text);
  } catch (error) {
    throw new ProblemError({
      code: 'file-syntax',
      thing: `file ${name}`,
      value: (error as Error).message,
      limit: 'it must be JSON',
      wayOut: 'Correct the file at that place.',
    });
  }
}

function showSequence(name: string, flags: SequenceFlags): void {
  const sequence = findSequence(name, flags.field, flags.library);
  const time = scanTime(sequence, {
    ...untroubledBreathing,
    ability: { holdSpanS: flags.hold, breathsPerMinute: flags.breaths },
  });
  const voxel = voxelOf(sequence);
  const tissues = flags.tissue.map((tissueName) => {
    const tissue = tissueAt(tissueName, sequence.fieldT);
    const signal = lineSignal(sequence, tissue);
    if (signal.kind === 'not computed') return { tissue: tissueName, notComputed: signal.why };
    const echoTrain = hasEchoTrain(sequence) || sequence.family === 'spin-echo';
    return {
      tissue: tissueName,
      t1Ms: tissue.t1Ms,
      t2Ms: tissue.t2Ms,
      signal: signal.weights[Math.floor(signal.weights.length / 2)],
      blurMm: spreadWidthMm(signal.weights, voxel.phaseMm),
      blurPixels: spreadWidthMm(signal.weights, 1),
      ...(echoTrain ? { echoes: trainEchoes(sequence, tissue) } : {}),
      remarks: signal.remarks,
    };
  });
  const target =
    flags.background === undefined
      ? undefined
      : assess(sequence, {
          kind: flags.border === true ? 'border' : 'lesion',
          tissue: flags.tissue[0] ?? '',
          background: flags.background,
          sizeMm: flags.size,
        });
  const result = {
    sequence,
    effectiveEchoTimeMs: effectiveEchoTimeMs(sequence),
    time,
    noise: noiseOf(sequence),
    ...(time.kind === 'possible' ? { rf: rfExposure(sequence, time) } : {}),
    tissues,
    ...(target === undefined ? {} : { target }),
  };
  if (flags.json === true) printJson(result);
  else print(sequenceText(result, flags));
}

function sequenceText(
  shown: {
    readonly sequence: Sequence;
    readonly effectiveEchoTimeMs: number;
    readonly time: ReturnType<typeof scanTime>;
    readonly rf?: ReturnType<typeof rfExposure>;
    readonly tissues: readonly {
      readonly tissue: string;
      readonly notComputed?: string;
      readonly signal?: number | undefined;
      readonly blurMm?: number;
      readonly blurPixels?: number;
    }[];
    readonly target?: ReturnType<typeof assess>;
  },
  flags: SequenceFlags,
): string {
  const { sequence, time, target } = shown;
  const lines = [
    `${sequence.id}  ${sequence.name}, ${sequence.fieldT} T`,
    wrapped(`${sequence.basis}: ${sequence.source}`, '  ', '  '),
    '',
  ];
  if (time.kind === 'impossible')
    lines.push(
      wrapped(`${time.problem.value}; ${time.problem.limit}. ${time.problem.wayOut}`, '  '),
    );
  else {
    lines.push(` Scan time ${minSec(time.acquisitionS)} min`);
    for (const row of time.working)
      lines.push(
        wrapped(`${fitted(row.what, 18)} ${row.value}  (${row.how})`, '  ', ' '.repeat(21)),
      );
    if (shown.rf !== undefined) {
      lines.push(
        wrapped(
          `B1+rms about ${shown.rf.b1RmsMicroTesla.toFixed(2)} microtesla, for comparing; the scanner's own figure and the implant's label rule.`,
          '  ',
        ),
      );
    }
  }
  lines.push(
    '',
    ` Effective echo time ${shown.effectiveEchoTimeMs.toFixed(1)} ms`,
    ` ${fitted('Tissue', 26)}   signal   blur, mm   pixels`,
  );
  for (const t of shown.tissues) {
    lines.push(
      t.notComputed === undefined
        ? ` ${fitted(t.tissue, 26)} ${(t.signal ?? 0).toFixed(4).padStart(8)} ${(t.blurMm ?? 0).toFixed(2).padStart(10)} ${(t.blurPixels ?? 0).toFixed(2).padStart(8)}`
        : wrapped(`${t.tissue}: not computed, ${t.notComputed}`, ' '),
    );
  }
  if (target?.kind === 'computed') {
    lines.push(
      '',
      ` ${flags.tissue[0]} in ${flags.background}, ${flags.size} mm`,
      `   contrast ${target.contrast.toFixed(4)}, contrast over noise ${target.contrastToNoise.toFixed(3)} (fixed unit), border ${Number.isFinite(target.borderWidthMm) ? `${target.borderWidthMm.toFixed(2)} mm` : 'not visible'}`,
    );
  } else if (target !== undefined) lines.push('', wrapped(`Not computed: ${target.why}.`, ' '));
  return lines.join('\n');
}
