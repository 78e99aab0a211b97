export * from './scanners.js';
export * from './conflicts.js';
