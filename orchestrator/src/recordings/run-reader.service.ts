import { Injectable } from '@nestjs/common';
import type { RunColumn, RunEvent } from '@cresthold/shared';
import { RunRecords } from './run-records.service.js';
import {
  RunFileReader,
  type RecordedTrace,
  type Samples,
  type SamplesQuery,
  type TraceChannel,
  type TracesQuery,
} from './run-file/index.js';

/** Reads run files, during a run and after. Each call opens the file and lets it go again. */
@Injectable()
export class RunReader {
  constructor(private readonly records: RunRecords) {}

  /** @throws run.no-samples */
  columns(runId: string): Promise<RunColumn[]> {
    return this.read(runId, (reader) => reader.columns());
  }

  /** @throws run.no-samples, request.invalid */
  samples(runId: string, query: SamplesQuery): Promise<Samples> {
    return this.read(runId, (reader) => reader.samples(query));
  }

  /** @throws run.no-samples */
  events(runId: string, afterSequence: number): Promise<RunEvent[]> {
    return this.read(runId, (reader) => reader.events(afterSequence));
  }

  /** @throws run.no-samples */
  traceChannels(runId: string): Promise<TraceChannel[]> {
    return this.read(runId, (reader) => reader.traceChannels());
  }

  /** @throws run.no-samples, request.invalid */
  traces(runId: string, query: TracesQuery): Promise<RecordedTrace[]> {
    return this.read(runId, (reader) => reader.traces(query));
  }

  /** @throws run.no-samples where the run has no such scan */
  scanTraces(runId: string, scan: number): ReturnType<RunFileReader['scanTraces']> {
    return this.read(runId, (reader) => reader.scanTraces(scan));
  }

  /** Opens the run's file for `work` and lets it go again.
   *
   * @throws run.no-samples
   */
  async read<T>(runId: string, work: (reader: RunFileReader) => Promise<T>): Promise<T> {
    const reader = await RunFileReader.open(this.records.file(runId));
    try {
      return await work(reader);
    } finally {
      await reader.close();
    }
  }
}
