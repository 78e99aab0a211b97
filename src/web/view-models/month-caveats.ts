import {
  mostKinds,
  type ComparedScenario,
  type Comparison,
  type Scenario,
} from '../../throughput/index.js';

/** What a reader must know before believing the figures of this run, one sentence each. */
export function monthCaveats(
  { scenarios, days }: Comparison,
  described: readonly Scenario[],
  requests: number,
): readonly string[] {
  const wanted = described.some((s) => s.examShares ?? s.groupShares);
  return [
    `${days.toLocaleString('en-GB')} working days were simulated for each scenario. The mix of exams and patients is that of the ${requests} requests on record${wanted ? ', weighed where a scenario asks for other shares' : ''}.`,
    ...standInWords(scenarios),
    ...(allAlike(described, (s) => s.seed)
      ? []
      : [
          'The scenarios have different seeds, so they did not meet the same patients: what differs between them is policy and luck together. Give them one seed.',
        ]),
    ...(allAlike(described, (s) => [s.requestsPerDay, s.listAtStart, s.emergenciesPerDay])
      ? []
      : [
          'They are not asked for the same number of exams: more patients served may only mean more patients who asked.',
        ]),
    ...(allAlike(described, (s) => s.daysAMonth)
      ? []
      : [
          'Their months are not equally long: compare figures a day, and neither the list at the end nor the days waited.',
        ]),
    'In brackets: 95 % limits. They say how far chance may have moved a figure in the days simulated; they say nothing about whether the numbers that a scenario was described with are right.',
    ...(scenarios.length > 1
      ? [
          'With this many figures, about one limit in twenty misses by chance: a small change that shows up in a single line proves little.',
        ]
      : []),
  ];
}

function standInWords([first]: readonly ComparedScenario[]): readonly string[] {
  if (first?.kinds === undefined) return [];
  const { planned, onRecord } = first.kinds;
  if (onRecord <= mostKinds || planned >= onRecord) return [];
  return [
    `${planned} kinds of request stand for all ${onRecord} on record: a sample within each exam and group of patients, spread over what they can bear.`,
  ];
}

const allAlike = (described: readonly Scenario[], of: (s: Scenario) => unknown): boolean =>
  new Set(described.map((s) => JSON.stringify(of(s)))).size <= 1;
