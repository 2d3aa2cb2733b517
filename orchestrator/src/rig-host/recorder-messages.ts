import type { RunEvent } from '@cresthold/shared';
import type { RunEnd, RunManifest, TraceBatch } from '../recordings/run-file/index.js';

/** Host → recorder thread, worked off in order. */
export type ToRecorder =
  /** Makes sure that the file can be written, before anything moves. */
  | { type: 'prepare'; file: string }
  | { type: 'begin'; manifest: RunManifest }
  | {
      type: 'batch';
      /** Transferred, and given back by `committed`. */
      data: Float64Array<ArrayBuffer>;
      rows: number;
      /** Step labels that are new since the batch before; a row names one by its index in all of them. */
      newLabels: string[];
      events: RunEvent[];
      /** Of the scans of this batch, transferred and given back as well; null where there are none. */
      traces: TraceBatch | null;
    }
  | { type: 'end'; end: Omit<RunEnd, 'scans'> }
  /** The run never began: the prepared file is removed. */
  | { type: 'abandon' }
  | { type: 'close' };

/** Recorder thread → host. */
export type FromRecorder =
  | { type: 'ready' }
  | { type: 'prepared'; error: string | null }
  | { type: 'committed'; data: Float64Array<ArrayBuffer>; traces: TraceBatch | null }
  /** Samples could not be written; they are kept and written again with the next batch. */
  | { type: 'failed'; message: string }
  | { type: 'ended'; error: string | null; scans: number }
  | { type: 'closed' };
