export * from './scanners.js';
export * from './conflicts.js';
export * from './gaps.js';
export * from './fits.js';
export * from './offers.js';
export {
  stepMin,
  priorityWorth,
  type FillProblem,
  type TakenPlace,
  type WaitingRequest,
} from './fill-problem.js';
export { compareFills, type FillObjective } from './fill-objective.js';
export * from './fill.js';
export { type NotPlaced, type WayIn } from './fill-why.js';
export { brokenRules, visitBreaks } from './fill-check.js';
export { takenPlace, waitingRequest } from './waiting-request.js';
export * from './mend-problem.js';
export { mend, type MendOptions } from './mend.js';
export { onTheWayIn } from './mend-moment.js';
export * from './mend-words.js';
export { repeatableStream } from './repeatable-stream.js';
