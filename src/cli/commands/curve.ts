import type { Command } from 'commander';
import { gradeMarks } from '../../exams/index.js';
import { linearSolver, type Plan } from '../../planning/index.js';
import { openDepartment, openRequests } from '../ground.js';
import { openPlanningGround } from '../own-records.js';
import { exitCodes, print, printJson, printProblems } from '../output.js';
import { planRequests } from '../plan-requests.js';
import { fitted, minutesOf, percent } from '../text/layout.js';

/** `curve`: what every further five minutes of slot would buy one patient. */
export function addCurveCommand(program: Command): void {
  program
    .command('curve')
    .summary('what every further five minutes of slot would buy')
    .description(
      'The time-answer curve of one request: the best grade of every question at each\nslot length. Grades below diagnostic are never shown without their words.',
    )
    .argument('<file>', 'requests as .csv or .json')
    .argument('<id>', 'the request')
    .option('--library <folder>', 'site library (default: the one that ships)')
    .option('--department <file>', 'department file (default: the demo department)')
    .option('--json', 'the curve as JSON')
    .addHelpText('after', '\nExample:\n  curve data-demo/requests.csv R-104')
    .action(
      async (
        file: string,
        id: string,
        flags: { library?: string; department?: string; json?: true },
      ) => {
        const ground = await openPlanningGround(flags.library);
        const read = openRequests(file);
        const one = read.requests.filter((r) => r.request.id === id);
        const solver = linearSolver();
        const list = await planRequests(one, openDepartment(flags.department), ground, solver);
        await solver.close();
        const plan = list.planned[0]?.plan;
        if (plan === undefined) {
          const unknown = {
            code: 'request-unknown',
            thing: `request ${id}`,
            value: 'not among the rows that could be planned',
            limit: `${read.requests.length} request(s) in ${file}`,
            wayOut: 'Check the number, or what is said of its row below.',
          };
          printProblems([unknown, ...list.problems, ...read.problems]);
          process.exitCode = exitCodes.nothing;
          return;
        }
        if (flags.json === true)
          printJson({ requestId: id, curve: plan.curve, alternatives: plan.alternatives });
        else print(curveText(plan));
      },
    );
}

const columnWidth = 7;

function curveText(plan: Plan): string {
  const marksUsed = new Map(
    plan.curve.flatMap((p) => p.grades.map((g) => [g.grade, g.words] as const)),
  );
  const shown = plan.curve;
  const head = ` ${fitted('Slot', 24)}${shown
    .map((p) =>
      minutesOf(p.slotS)
        .replace(' min', "'")
        .padStart(columnWidth - 1),
    )
    .join(' ')}`;
  const rows = plan.answers.map((answer, index) => {
    const cells = shown.map((p) =>
      gradeMarks[p.grades[index]?.grade ?? 'none'].padStart(columnWidth - 1),
    );
    return ` ${fitted(answer.name, 24)}${cells.join(' ')}`;
  });
  const chance = ` ${fitted('Chance to finish', 24)}${shown
    .map((p) =>
      (p.sequences.length === 0 ? '-' : percent(p.chanceToFinish))
        .replace(' ', '')
        .padStart(columnWidth - 1),
    )
    .join(' ')}`;
  const legend = [...marksUsed].map(([grade, words]) => ` ${gradeMarks[grade]}  ${words}`);
  return [
    `${plan.requestId}  ${plan.exam.name}, ${plan.scanner.name}; asked slot ${minutesOf(plan.slotS)}`,
    ...chunked(head, rows, chance, shown.length),
    '',
    ...legend,
  ].join('\n');
}

/** Tables wider than the terminal are broken into blocks of columns. */
function chunked(head: string, rows: readonly string[], chance: string, columns: number): string[] {
  const perBlock = Math.floor((80 - 25) / columnWidth);
  const blocks: string[] = [];
  for (let from = 0; from < columns; from += perBlock) {
    const cut = (line: string) =>
      line.slice(0, 25) + line.slice(25 + from * columnWidth, 25 + (from + perBlock) * columnWidth);
    blocks.push('', cut(head), ...rows.map(cut), cut(chance));
  }
  return blocks;
}
