export * from './scanners.js';
export * from './conflicts.js';
export * from './gaps.js';
export * from './fits.js';
