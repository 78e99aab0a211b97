import { clock, type Scanner } from '../../day/index.js';
import type { SiteLibrary } from '../../exams/index.js';
import {
  groupNames,
  patientGroups,
  slotsMin,
  type FieldProblem,
  type Scenario,
  type SourcedScenario,
} from '../../throughput/index.js';
import { numberFields, type NumberFieldWords, type ScenarioValues } from './scenario-fields.js';

/** Most scanners alike that the form asks for. */
export const mostAlike = 4;

/** A scenario as the form's fields. */
export function scenarioValues(scenario: Scenario, own: readonly Scanner[]): ScenarioValues {
  const values: Record<string, string> = { name: scenario.name };
  for (const { field, percent } of numberFields) {
    const value = scenario[field];
    values[field] = value === undefined ? '' : figure(percent ? 100 * value : value);
  }
  for (const scanner of own) {
    const alike = scenario.scanners.filter((s) => rootOf(s.id, own) === scanner.id);
    const shown = alike[0] ?? scanner;
    values[`many ${scanner.id}`] = String(alike.length);
    values[`hours ${scanner.id}`] = stretchesText(shown.hours);
    values[`breaks ${scanner.id}`] = stretchesText(shown.breaks);
  }
  const { slots } = scenario;
  values['slots'] = slots.kind;
  values['fixedMin'] = String(slots.kind === 'fixed' ? slots.minutes : 30);
  values['mostMin'] = String(slots.kind === 'tolerance' ? slots.mostMin : 60);
  values['otherwiseMin'] = String(slots.kind === 'by exam' ? slots.otherwise : 30);
  if (slots.kind === 'by exam')
    for (const [examId, minutes] of Object.entries(slots.minutes))
      values[`slot ${examId}`] = String(minutes);
  values['content'] = scenario.content;
  values['quickLooks'] = scenario.quickLooks ? 'yes' : '';
  values['groupByCoil'] = scenario.groupByCoil ? 'yes' : '';
  for (const [examId, share] of Object.entries(scenario.examShares ?? {}))
    values[`exam ${examId}`] = figure(100 * share);
  for (const [group, share] of Object.entries(scenario.groupShares ?? {}))
    values[`group ${group}`] = figure(100 * share);
  scenario.teams.forEach((team, n) => {
    values[`team ${n} name`] = team.name;
    values[`team ${n} count`] = String(team.count);
    for (const group of team.groups) values[`team ${n} ${group}`] = 'yes';
  });
  return values;
}

const figure = (value: number) => String(Number(value.toPrecision(6)));

/** A scanner's copies carry its id with a number behind. */
export function rootOf(id: string, own: readonly Scanner[]): string {
  if (own.some((s) => s.id === id)) return id;
  return own.find((s) => id.startsWith(`${s.id}-`))?.id ?? id;
}

export const stretchesText = (stretches: Scanner['hours']): string =>
  stretches.map((s) => `${clock(s.fromMin)}-${clock(s.toMin)}`).join(', ');

/** Scanners that a form asks for: the department's, and those of its scenario that the department no longer has. */
export function scannersAsked(
  own: readonly Scanner[],
  described: readonly Scanner[] = [],
): readonly Scanner[] {
  const others = described.filter((s) => !own.some((o) => o.id === rootOf(s.id, own)));
  return [...own, ...others.filter((s) => rootOf(s.id, others) === s.id)];
}

export interface ScenarioFormGround {
  readonly values: ScenarioValues;
  readonly own: readonly Scanner[];
  readonly library: SiteLibrary;
  readonly examsOnRecord: ReadonlySet<string>;
  readonly usual: SourcedScenario;
  readonly problems: readonly FieldProblem[];
}

/** Everything the form shows. */
export function scenarioForm(ground: ScenarioFormGround) {
  const { values, own, library, examsOnRecord, problems } = ground;
  const { scenario: usual, sources } = ground.usual;
  const said = new Map<string, string>();
  for (const { field, problem } of problems)
    said.set(field, `${problem.value} does not fit: ${problem.limit}. ${problem.wayOut}`);
  const at = (field: string) => said.get(field);
  const given = (field: string) => (values[field] ?? '') !== '';
  const exams = [...library.exams.values()]
    .filter(({ id }) => examsOnRecord.has(id) || given(`exam ${id}`) || given(`slot ${id}`))
    .map(({ id, name }) => ({
      ...{ id, name, share: values[`exam ${id}`] ?? '', slot: values[`slot ${id}`] ?? '' },
      problem: at(`slot ${id}`),
    }));
  const groups = patientGroups
    .filter((g) => g !== 'emergency' || given('group emergency'))
    .map((id) => ({ id, name: groupNames[id], share: values[`group ${id}`] ?? '' }));
  return {
    values,
    at,
    problems: problems.map((p) => p.problem),
    scanners: own.map(({ id, name, fieldT }) => ({
      ...{ id, name, fieldT },
      many: values[`many ${id}`] ?? '1',
      hours: values[`hours ${id}`] ?? '',
      breaks: values[`breaks ${id}`] ?? '',
      problem: at(`hours ${id}`),
    })),
    sections: sectionNames.map(({ id, name, hint }) => ({
      ...{ id, name, hint },
      fields: numberFields
        .filter((f) => f.section === id)
        .map((f) => ({
          ...f,
          value: values[f.field] ?? '',
          source: sourceWords(f, usual, sources),
          problem: at(f.field),
        })),
    })),
    slotsMin,
    exams,
    groups,
    /** Whether the mix or slots by exam say anything: they are shown open then. */
    mixOpen:
      exams.some((e) => e.share !== '' || e.slot !== '') || groups.some((g) => g.share !== ''),
    teams: teamNumbers(values).map((n) => ({
      n,
      name: values[`team ${n} name`] ?? '',
      count: values[`team ${n} count`] ?? '',
      groups: patientGroups.map((id) => ({
        id,
        name: groupNames[id],
        needed: values[`team ${n} ${id}`] === 'yes',
      })),
    })),
    mixSource: sources['mix'] ?? '',
  };
}

/** Teams that the form asks for: two, or as many as were given. */
export function teamNumbers(values: ScenarioValues): readonly number[] {
  const given = Object.keys(values).flatMap((key) => {
    const number = /^team (\d) name$/.exec(key)?.[1];
    return number === undefined ? [] : [Number(number)];
  });
  return Array.from({ length: Math.max(1, ...given) + 1 }, (_, n) => n);
}

/** Where the usual value comes from, with the value: what stands in the field may have been changed. */
function sourceWords(
  { field, percent }: NumberFieldWords,
  usual: Scenario,
  sources: Readonly<Record<string, string>>,
): string | undefined {
  const source = sources[field];
  const value = usual[field];
  if (source === undefined) return undefined;
  if (value === undefined) return source;
  return `usual here: ${figure(percent ? 100 * value : value)}${percent ? ' %' : ''}, ${source}`;
}

const sectionNames = [
  { id: 'demand', name: 'What is asked of the department', hint: '' },
  {
    id: 'day',
    name: 'The day',
    hint: '',
  },
  {
    id: 'people',
    name: 'Who comes and how',
    hint: 'Published figures stand in where this site has no records of its own.',
  },
  { id: 'after', name: 'What comes back', hint: '' },
  {
    id: 'run',
    name: 'How much is simulated',
    hint: 'More months narrow the limits: four times as many halve them.',
  },
] as const;
