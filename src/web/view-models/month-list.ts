import type { StoredScenario } from '../../store/index.js';
import type { Scenario, SlotRule } from '../../throughput/index.js';
import type { MonthRun } from '../month/month-runs.js';

/** Scenarios and runs as the month's page lists them. */
export function monthList(
  stored: readonly StoredScenario[],
  runs: readonly MonthRun[],
  mostCompared: number,
) {
  return {
    scenarios: stored.map(({ id, version, scenario }, n) => ({
      // The first and the newest: a scenario just described is among them.
      ticked: n === 0 || n > stored.length - mostCompared,
      id,
      version,
      name: scenario.name,
      scanners: scenario.scanners.length,
      demand: `${plain(scenario.requestsPerDay)} a day, ${scenario.listAtStart} waiting`,
      slots: slotWords(scenario.slots),
      content: contentWords(scenario),
    })),
    runs: runs.map((run) => ({
      id: run.id,
      names: run.scenarios.map((s) => s.name).join(' | '),
      state: stateWords[run.state],
    })),
  };
}

export const stateWords: Readonly<Record<MonthRun['state'], string>> = {
  running: 'running',
  done: 'done',
  stopped: 'stopped early',
  failed: 'failed',
};

function slotWords(slots: SlotRule): string {
  if (slots.kind === 'fixed') return `${slots.minutes} min for everybody`;
  if (slots.kind === 'by exam') return 'by exam';
  return `by tolerance, up to ${slots.mostMin} min`;
}

function contentWords({ content, quickLooks }: Scenario): string {
  const what = content === 'planned' ? 'planned for the patient' : 'full protocol';
  return `${what}, ${quickLooks ? 'quick looks allowed (not diagnostic)' : 'no quick looks'}`;
}

const plain = (value: number) => String(Number(value.toPrecision(4)));
