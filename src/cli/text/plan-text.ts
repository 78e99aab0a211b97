import colour from 'picocolors';
import type { Grade } from '../../exams/index.js';
import type { Plan, PlannedAnswer } from '../../planning/index.js';
import { fitted, minSec, minutesOf, pageWidth, percent, wrapped } from './layout.js';

const paint: Readonly<Record<Grade, (text: string) => string>> = {
  diagnostic: (t) => t,
  targeted: (t) => colour.bold(t),
  screening: (t) => colour.inverse(t),
  none: (t) => colour.dim(t),
};

export interface PlanHeading {
  /** Where it is booked, in words; empty when it is not. */
  readonly when: string;
}

/** A whole plan for the terminal: what a scheduler reads, top to bottom. */
export function planText(plan: Plan, heading: PlanHeading): string {
  return [
    ...headingLines(plan, heading),
    '',
    ' Answers',
    ...plan.answers.map((a) => answerText(a, true)),
    '',
    ' Running order (starts at, takes, chance of clean images)',
    ...stepLines(plan),
    ...listed(
      ' Not run',
      plan.leftOut.map((l) => l.why),
    ),
    ...listed(' Signed entries this plan leans on', plan.signedEntries),
    ...curveLines(plan),
    ...alternativeLines(plan),
    ...owedLines(plan),
    ...listed(' What was said', [plan.patient.still, plan.patient.hold, plan.patient.stay]),
    ...listed(' Cautions', plan.cautions),
    colour.dim(wrapped(`Set chosen by ${plan.provedBy}.`, ' ')),
  ].join('\n');
}

/** The same in short, for lists: grades with reasons, table time, order in one paragraph. */
export function planBrief(plan: Plan, heading: PlanHeading): string {
  const order = plan.steps
    .filter((s) => s.kind !== 'localiser')
    .map((s) => `${minSec(s.startS)} ${s.name}`)
    .join('; ');
  return [
    ...headingLines(plan, heading),
    ...plan.answers.map((a) => answerText(a, false)),
    ...(order === '' ? [] : [wrapped(`Order: ${order}.`, '   ', '   ')]),
    ...plan.signedEntries.map((e) => wrapped(`Signed entry: ${e}.`, '   ', '     ')),
    ...plan.cautions
      .filter((c) => /undecided|not done yet|not approved/.test(c))
      .map((c) => wrapped(`! ${c}`, '   ', '     ')),
  ].join('\n');
}

function headingLines(plan: Plan, heading: PlanHeading): string[] {
  const right = `${heading.when === '' ? 'not yet placed' : heading.when}, ${plan.scanner.name}`;
  const left = `${plan.requestId}  ${plan.exam.name}`;
  const { tenthS, medianS, ninetiethS } = plan.tableTime;
  const holds = plan.chanceToFinish >= plan.wishedChance;
  const { sameGradesFromS } = plan.alternatives;
  const shorter =
    holds && sameGradesFromS < plan.slotS && plan.steps.length > 1
      ? ` (${minutesOf(sameGradesFromS)} would give the same grades)`
      : '';
  const empty = plan.steps.length === 1;
  const time = empty
    ? `Nothing fits into its ${minutesOf(plan.slotS)} slot: getting in and out alone takes ${minutesOf(tenthS)} to ${minutesOf(ninetiethS)}`
    : `${percent(plan.chanceToFinish)} chance to end inside its ${minutesOf(plan.slotS)} slot${holds ? shorter : ` (wished: ${percent(plan.wishedChance)})`}; table time ${minutesOf(medianS)}, 8 in 10 between ${minutesOf(tenthS)} and ${minutesOf(ninetiethS)}`;
  const oneLine = left.length + right.length + 2 <= pageWidth;
  return [
    oneLine
      ? colour.bold(left) + right.padStart(pageWidth - left.length)
      : `${colour.bold(left)}\n   ${right}`,
    wrapped(holds && !empty ? time : `! ${time}`, '   '),
  ];
}

function answerText(answer: PlannedAnswer, full: boolean): string {
  const words = paint[answer.grade](answer.words);
  const heading = `${answer.mark.padEnd(5)}${answer.name}: ${words}`;
  const lines = [wrapped(heading, ' ', '      ')];
  if (answer.conditional !== undefined)
    lines.push(wrapped(`Condition: ${answer.conditional}.`, '      ', '      '));
  if (answer.grade !== 'diagnostic') {
    lines.push(wrapped(answer.because, '      ', '      '));
    if (full && answer.notExcluded !== undefined) {
      lines.push(wrapped(`Not excluded: ${answer.notExcluded}`, '      ', '      '));
    }
    const lifts = full ? answer.lifts : answer.lifts.slice(0, 1);
    for (const lift of lifts) lines.push(wrapped(`> ${lift.sentence}`, '      ', '        '));
  }
  return lines.join('\n');
}

function stepLines(plan: Plan): string[] {
  return plan.steps.map((step) => {
    const chance = step.cleanChance === undefined ? '' : percent(step.cleanChance);
    const first = `  ${minSec(step.startS).padStart(6)}  ${fitted(step.name, 52)} ${minSec(step.endS - step.startS).padStart(6)}  ${chance.padStart(6)}`;
    return step.stillness === undefined
      ? first
      : `${first}\n          ${colour.dim(step.stillness)}`;
  });
}

function curveLines(plan: Plan): string[] {
  const seen = new Map<string, Plan['curve'][number]>();
  for (const point of plan.curve) {
    const key = point.grades.map((g) => g.grade).join('|');
    if (!seen.has(key)) seen.set(key, point);
  }
  if (seen.size < 2) return [];
  const lines = [...seen.values()].map((point) => {
    const asked = point.slotS === plan.slotS ? ' (asked)' : '';
    return wrapped(
      `${minutesOf(point.slotS).padStart(7)}${asked}: ${gradesInWords(plan, point.grades)}`,
      ' ',
      '          ',
    );
  });
  return ['', ' What more minutes would buy: from', ...lines];
}

/** Questions gathered under their grade: "diagnostic: A, B; not answered: C". */
function gradesInWords(plan: Plan, grades: Plan['curve'][number]['grades']): string {
  const byWords = new Map<string, string[]>();
  grades.forEach((g, n) => {
    const names = byWords.get(g.words) ?? [];
    names.push(plan.answers[n]?.name ?? g.questionId);
    byWords.set(g.words, names);
  });
  if (byWords.size === 1)
    return `everything ${[...byWords.keys()][0]}`.replace('everything not', 'nothing');
  return [...byWords].map(([words, names]) => `${names.join(', ')}: ${words}`).join('; ');
}

function alternativeLines(plan: Plan): string[] {
  const { shortestAllDiagnosticS, noneBecause, nothingMoreAfterS, twoVisits } = plan.alternatives;
  const lines: string[] = [];
  if (shortestAllDiagnosticS !== undefined) {
    lines.push(
      `Shortest slot in which everything is diagnostic: ${minutesOf(shortestAllDiagnosticS)}.`,
    );
  } else if (noneBecause !== undefined) lines.push(noneBecause);
  lines.push(`A slot longer than ${minutesOf(nothingMoreAfterS)} buys nothing more.`);
  if (twoVisits !== undefined) {
    lines.push(
      `Two visits of ${minutesOf(plan.slotS)}: the second runs ${twoVisits.secondVisit.join('; ')}. Then ${gradesInWords(plan, twoVisits.grades)}.`,
    );
  }
  return listed(' Alternatives', lines);
}

function owedLines(plan: Plan): string[] {
  return listed(
    ' Answers owed after this exam',
    plan.owed.map((o) => `${o.name}: ${o.words}; due in ${o.dueInDays} day(s).`),
  );
}

function listed(title: string, lines: readonly string[]): string[] {
  if (lines.length === 0) return [];
  return ['', title, ...lines.map((l) => wrapped(`- ${l}`, '  ', '    '))];
}
