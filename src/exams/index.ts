export * from './exam.js';
export * from './grade.js';
export * from './policy.js';
export * from './site-library.js';
export * from './factors.js';
