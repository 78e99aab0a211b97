import type { DayStretch, Scanner } from '../../day/index.js';
import {
  checkScenario,
  patientGroups,
  scenarioRanges,
  type FieldProblem,
  type PatientGroup,
  type Scenario,
  type SlotRule,
} from '../../throughput/index.js';
import { fieldLabel, numberFields, type ScenarioValues } from '../view-models/scenario-fields.js';
import { mostAlike, teamNumbers } from '../view-models/scenario-form.js';

/** A scenario from the form's fields, with everything that is wrong at its field; a field that cannot be read is no number. */
export function readScenarioForm(
  values: ScenarioValues,
  own: readonly Scanner[],
  examIds: readonly string[],
): { readonly scenario: Scenario; readonly problems: readonly FieldProblem[] } {
  const numbers = Object.fromEntries(
    numberFields.flatMap(({ field, percent, optional }) => {
      const text = (values[field] ?? '').trim();
      if (text === '' && optional === true) return [];
      const value = numberIn(text);
      return [[field, percent === true ? fraction(value) : value]];
    }),
  ) as Pick<Scenario, (typeof numberFields)[number]['field']>;
  const unreadable: FieldProblem[] = [];
  const examShares = sharesIn(values, 'exam', examIds);
  const groupShares = sharesIn(values, 'group', patientGroups);
  const scenario: Scenario = {
    ...numbers,
    name: (values['name'] ?? '').trim(),
    scanners: own.flatMap((scanner) => scannersIn(values, scanner, unreadable)),
    slots: slotsIn(values, examIds),
    content: values['content'] === 'full protocol' ? 'full protocol' : 'planned',
    quickLooks: values['quickLooks'] === 'yes',
    groupByCoil: values['groupByCoil'] === 'yes',
    teams: teamsIn(values, unreadable),
    ...(examShares === undefined ? {} : { examShares }),
    ...(groupShares === undefined ? {} : { groupShares }),
  };
  const found = checkScenario(scenario, { examIds });
  const fields = new Set(unreadable.map((p) => p.field));
  const problems = [...unreadable, ...found.filter((p) => !fields.has(p.field))];
  return { scenario, problems: problems.map((p) => inFormWords(p, values, own)) };
}

/** The field as the form calls it, what was typed, and the limit as the form asks for it. */
function inFormWords(
  { field, problem }: FieldProblem,
  values: ScenarioValues,
  own: readonly Scanner[],
): FieldProblem {
  const asked = numberFields.find((f) => f.field === field);
  if (asked === undefined || problem.code !== 'scenario-value')
    return { field, problem: { ...problem, thing: asked?.label ?? fieldLabel(field, own) } };
  const { low, high } = scenarioRanges[asked.field];
  const typed = (values[field] ?? '').trim();
  return {
    field,
    problem: {
      ...problem,
      thing: asked.label,
      value: typed === '' ? 'empty' : `"${typed}"`,
      ...(asked.percent === true ? { limit: `${100 * low} to ${100 * high} %` } : {}),
    },
  };
}

/** A figure with point or comma; anything else is no number. */
const numberIn = (text: string): number =>
  /^-?\d+([.,]\d+)?$/.test(text) ? Number(text.replace(',', '.')) : Number.NaN;

/** Percent as a fraction, without the last digits that binary arithmetic makes up. */
const fraction = (percent: number): number => Number((percent / 100).toPrecision(12));

/** Shares in percent; absent when every field is empty: as on record. */
function sharesIn<K extends string>(
  values: ScenarioValues,
  kind: string,
  ids: readonly K[],
): Record<K, number> | undefined {
  const given = ids.flatMap((id) => {
    const text = (values[`${kind} ${id}`] ?? '').trim();
    return text === '' ? [] : [[id, fraction(numberIn(text))] as const];
  });
  return given.length === 0 ? undefined : (Object.fromEntries(given) as Record<K, number>);
}

function slotsIn(values: ScenarioValues, examIds: readonly string[]): SlotRule {
  if (values['slots'] === 'fixed')
    return { kind: 'fixed', minutes: numberIn(values['fixedMin'] ?? '') };
  if (values['slots'] === 'by exam') {
    const given = examIds.flatMap((id) => {
      const text = (values[`slot ${id}`] ?? '').trim();
      return text === '' ? [] : [[id, numberIn(text)] as const];
    });
    return {
      kind: 'by exam',
      minutes: Object.fromEntries(given),
      otherwise: numberIn(values['otherwiseMin'] ?? ''),
    };
  }
  return { kind: 'tolerance', mostMin: numberIn(values['mostMin'] ?? '') };
}

/** As many scanners of one kind as asked for, with the hours given; copies get a number behind their id. */
function scannersIn(
  values: ScenarioValues,
  scanner: Scanner,
  problems: FieldProblem[],
): readonly Scanner[] {
  const many = numberIn(values[`many ${scanner.id}`] ?? '1');
  const field = `hours ${scanner.id}`;
  if (!Number.isInteger(many) || many < 0 || many > mostAlike) {
    problems.push(
      wrong(field, values[`many ${scanner.id}`] ?? '', `0 to ${mostAlike} scanners alike`),
    );
    return [];
  }
  if (many === 0) return [];
  const hours = stretchesIn(values[field] ?? '');
  const breaks = stretchesIn(values[`breaks ${scanner.id}`] ?? '');
  if (hours === undefined || breaks === undefined) {
    const text = hours === undefined ? values[field] : values[`breaks ${scanner.id}`];
    problems.push(wrong(field, text ?? '', 'hours such as 08:00-18:00, several with commas'));
  }
  return Array.from({ length: many }, (_, n): Scanner => ({
    ...scanner,
    id: n === 0 ? scanner.id : `${scanner.id}-${n + 1}`,
    name: n === 0 ? scanner.name : `${scanner.name} (${n + 1})`,
    hours: hours ?? scanner.hours,
    breaks: breaks ?? scanner.breaks,
  }));
}

const wrong = (field: string, value: string, limit: string): FieldProblem => ({
  field,
  problem: {
    code: 'scenario-value',
    thing: `scenario, field ${field}`,
    value: `"${value}"`,
    limit,
    wayOut: 'Correct the field.',
  },
});

/** "08:00-12:30, 13:00-18:00"; hours beyond a day are read and refused at their field. */
function stretchesIn(text: string): readonly DayStretch[] | undefined {
  const parts = text
    .split(',')
    .map((part) => part.trim())
    .filter((part) => part !== '');
  const read = parts.map((part) => {
    const found = /^(\d{1,2})[:.](\d{2})\s*(?:-|to|–)\s*(\d{1,2})[:.](\d{2})$/.exec(part);
    if (found === null || Number(found[2]) > 59 || Number(found[4]) > 59) return undefined;
    return {
      fromMin: Number(found[1]) * 60 + Number(found[2]),
      toMin: Number(found[3]) * 60 + Number(found[4]),
    };
  });
  return read.includes(undefined) ? undefined : (read as DayStretch[]);
}

function teamsIn(values: ScenarioValues, problems: FieldProblem[]): Scenario['teams'] {
  return teamNumbers(values).flatMap((n) => {
    const name = (values[`team ${n} name`] ?? '').trim();
    const count = (values[`team ${n} count`] ?? '').trim();
    const groups = patientGroups.filter(
      (g): g is PatientGroup => values[`team ${n} ${g}`] === 'yes',
    );
    if (name === '' && (count !== '' || groups.length > 0))
      problems.push(wrong('teams', '', 'a team has a name'));
    return name === '' ? [] : [{ name, count: numberIn(count), groups }];
  });
}
