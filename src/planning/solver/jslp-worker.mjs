// Runs javascript-lp-solver away from the main thread, so that the wall clock can end it: its own
// timeout is looked at between nodes only. The only file that imports it.
import { parentPort } from 'node:worker_threads';
import solver from 'javascript-lp-solver';

parentPort.on('message', ({ id, programme }) => {
  try {
    parentPort.postMessage({ id, ...solve(programme) });
  } catch (error) {
    parentPort.postMessage({ id, kind: 'failed', why: String(error) });
  }
});

/** Maximise goal over columns >= 0, the first `wholes` of them whole, under rows `sum <= most`. */
function solve({ columns, wholes, goal, rows }) {
  const model = new solver.Model();
  // The default presolve corrupts the reported result.
  model.usePresolve = false;
  // Partial pricing returned wrong optima; look at every column.
  model.tableau.pricingBatchSize = 1e9;
  model.maximize();
  const variables = [];
  for (let j = 0; j < columns; j++) variables.push(model.addVariable(goal[j], `c${j}`, j < wholes));
  for (const { most, at, values } of rows) {
    const row = model.smallerThan(most);
    for (let k = 0; k < at.length; k++) row.addTerm(values[k], variables[at[k]]);
  }
  const solution = model.solve();
  return {
    kind: 'solved',
    feasible: solution.feasible === true && solution.bounded !== false,
    values: Float64Array.from(variables, (variable) => variable.value),
  };
}
