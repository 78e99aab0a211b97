import type { FieldProblem } from '../../throughput/index.js';

/** Refusals that belong to no field: what was typed stands in the form and is not saved. */
const refusal = (value: string, limit: string, wayOut: string): FieldProblem => ({
  field: '',
  problem: { code: 'scenario-not-saved', thing: 'Not saved yet', value, limit, wayOut },
});

export const changedMeanwhile = (name: string): FieldProblem =>
  refusal(
    `Somebody else changed this scenario while you were writing; it is called "${name}" now`,
    'What you wrote stands below',
    'Save again to put yours in the place of theirs, or open the scenario in a second window to see theirs first.',
  );

export const takenOutMeanwhile: FieldProblem = refusal(
  'Somebody else took this scenario out while you were writing',
  'What you wrote stands below',
  'Save to keep it as a new scenario.',
);

export const notKept = (why: string): FieldProblem =>
  refusal(`${why.charAt(0).toUpperCase()}${why.slice(1)}`, 'What you wrote stands below', '');
