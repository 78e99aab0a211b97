export * from './library/index.js';
export * from './requests/index.js';
export * from './department/index.js';
