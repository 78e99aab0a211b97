export { readRawSequence } from './raw-sequence.js';
export { readLibrary, type LoadedLibrary } from './read-library.js';
export { resolveSequence } from './read-sequences.js';
export { sequenceEntry, type SequenceEntry } from './sequence-schema.js';
export { policyFile } from './policy-schema.js';
export { describe, type LibraryFile } from './yaml-source.js';
