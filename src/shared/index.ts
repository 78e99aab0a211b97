export * from './problem.js';
export * from './random.js';
