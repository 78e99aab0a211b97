import type { Scanner } from '../../day/index.js';
import type { Scenario } from '../../throughput/index.js';

/** Form fields as text. */
export type ScenarioValues = Readonly<Record<string, string>>;

type NumberField = {
  [K in keyof Scenario]-?: NonNullable<Scenario[K]> extends number ? K : never;
}[keyof Scenario];

/** A number of a scenario as the form asks for it. */
export interface NumberFieldWords {
  readonly field: NumberField;
  readonly label: string;
  readonly unit: string;
  readonly section: 'demand' | 'day' | 'people' | 'after' | 'run';
  /** Asked for in percent, kept as a fraction. */
  readonly percent?: true;
  /** May be left empty. */
  readonly optional?: true;
}

export const numberFields: readonly NumberFieldWords[] = [
  { field: 'requestsPerDay', label: 'New requests', unit: 'a working day', section: 'demand' },
  {
    field: 'listAtStart',
    label: 'Waiting when the month begins',
    unit: 'requests',
    section: 'demand',
  },
  { field: 'emergenciesPerDay', label: 'Emergencies', unit: 'a day', section: 'demand' },
  {
    field: 'cutShortAfterMin',
    label: 'Cut an exam short this long past its slot',
    unit: 'min; empty: it is finished however long it takes',
    section: 'day',
    optional: true,
  },
  { field: 'bufferMin', label: 'Kept free after each slot', unit: 'min', section: 'day' },
  { field: 'overbooked', label: 'Overbooked', unit: 'patients a scanner and day', section: 'day' },
  { field: 'technologists', label: 'Exams that staff can run at once', unit: '', section: 'day' },
  {
    field: 'overtimeUpToMin',
    label: 'Nobody is started later than',
    unit: 'min after closing',
    section: 'day',
  },
  { field: 'noShowShare', label: 'Do not come', unit: '%', section: 'people', percent: true },
  { field: 'lateShare', label: 'Come late', unit: '%', section: 'people', percent: true },
  { field: 'lateMeanMin', label: 'Late by, on average', unit: 'min', section: 'people' },
  {
    field: 'earlyMin',
    label: 'The others come before their time by',
    unit: 'min',
    section: 'people',
  },
  {
    field: 'cannulaShare',
    label: 'Contrast exams held up by the cannula',
    unit: '%',
    section: 'people',
    percent: true,
  },
  { field: 'cannulaMeanMin', label: 'Held up by, on average', unit: 'min', section: 'people' },
  {
    field: 'downShare',
    label: 'Chance that a scanner stands still on a day',
    unit: '%',
    section: 'people',
    percent: true,
  },
  { field: 'downMeanMin', label: 'Stands still for, on average', unit: 'min', section: 'people' },
  {
    field: 'followUpShare',
    label: 'Exams left below diagnostic that come back',
    unit: '%',
    section: 'after',
    percent: true,
  },
  {
    field: 'followUpAfterDays',
    label: 'They come back after',
    unit: 'working days',
    section: 'after',
  },
  {
    field: 'months',
    label: 'Months',
    unit: 'each begins with an equally long list',
    section: 'run',
  },
  { field: 'daysAMonth', label: 'Working days a month', unit: '', section: 'run' },
  {
    field: 'seed',
    label: 'Seed of chance',
    unit: 'scenarios with the same number meet the same patients',
    section: 'run',
  },
];

const otherLabels: Readonly<Record<string, string>> = {
  name: 'Name',
  slots: 'How long is a slot?',
  scanners: 'Scanners',
  teams: 'Team that must be there',
  examShares: 'Mix of exams',
  groupShares: 'Mix of patients',
};

/** What the form calls a field that is no number of its own. */
export function fieldLabel(field: string, own: readonly Scanner[]): string {
  const hours = own.find((s) => field === `hours ${s.id}`);
  if (hours !== undefined) return `Hours of ${hours.name}`;
  return otherLabels[field] ?? (field.startsWith('slot ') ? 'Slot by exam' : field);
}
