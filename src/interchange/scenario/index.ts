export { readScenarios } from './read-scenarios.js';
export { storedScenario } from './scenario-schema.js';
