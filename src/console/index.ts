export * from './events.js';
export * from './fold.js';
export * from './remaining.js';
export * from './replan.js';
export * from './achieved.js';
