export * from './library/index.js';
export * from './requests/index.js';
export * from './department/index.js';
export * from './scenario/index.js';
export { parseClockMin } from './clock-time.js';
