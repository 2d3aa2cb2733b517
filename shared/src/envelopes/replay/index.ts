export { EnvelopeReplay, type ReplayedRecord } from './envelope-replay.js';
export type { RecordedEnd } from './replay-hints.js';
export * from './replay-report.schema.js';
