import { serveDay, type DayRules, type Visit } from '../../src/throughput/serve-day.js';

/** One scanner that never closes. */
export const oneScanner: DayRules = {
  scanners: 1,
  closed: [[]],
  teams: [],
  atOnce: 1,
  lastStartMin: [Infinity],
};

export interface Queued {
  /** From arrival to start. */
  readonly waits: readonly number[];
  readonly idle: number;
  readonly makespan: number;
}

/** Serves arrivals with given service times on one scanner, in order of arrival. */
export function queued(arrivals: readonly number[], services: readonly number[]): Queued {
  const visits = arrivals.map((readyMin, order): Visit => ({
    readyMin,
    scanner: 0,
    able: 1,
    order,
    team: -1,
    staff: 1,
  }));
  const { startMin, endMin } = serveDay(visits, oneScanner, (v) => services[v]!);
  const makespan = endMin.reduce((a, b) => Math.max(a, b), 0);
  return {
    waits: arrivals.map((at, v) => startMin[v]! - at),
    idle: makespan - services.reduce((a, b) => a + b, 0),
    makespan,
  };
}
