export * from './run-file.types.js';
export { closeInterrupted, sealFile } from './run-file-end.js';
export { RunFileReader, type LastScan } from './run-file-reader.js';
export type { RecordedScan } from './run-file-scans.js';
export type { Samples, SamplesQuery } from './run-file-samples.js';
export { traceChannels, type RecordedTrace, type TraceChannel, type TracesQuery } from './run-file-traces.js';
export { RunFileWriter } from './run-file-writer.js';
export { rowLead, type ScanBatch } from './scan-batch.js';
export { traceLead, type TraceBatch } from './trace-batch.js';
