export * from './statement.js';
export * from './survival.js';
export * from './groups.js';
export * from './profile.js';
export * from './clean-chance.js';
export * from './kaplan-meier.js';
export * from './log-rank.js';
export * from './achieved.js';
