import { Injectable } from '@nestjs/common';
import { afterKey, toPage, type Page } from '../paging/page.js';
import { RunReader } from '../recordings/run-reader.service.js';
import { RunRecords } from '../recordings/run-records.service.js';
import type { RunTrace, ScanTraces, TraceChannelDto, TracesRequest } from './dto/run-trace.dto.js';

/** The arrays that a run recorded. */
@Injectable()
export class RunTraces {
  constructor(
    private readonly records: RunRecords,
    private readonly reader: RunReader,
  ) {}

  /** @throws run.not-found, run.no-samples */
  async channels(runId: string): Promise<TraceChannelDto[]> {
    await this.records.get(runId);
    const channels = await this.reader.traceChannels(runId);
    return channels.map(({ id, title, unit, display, axis }) => ({ id, title, unit, display, axis }));
  }

  /** @throws run.not-found, run.no-samples, request.invalid */
  async list(runId: string, request: TracesRequest): Promise<Page<RunTrace>> {
    await this.records.get(runId);
    const { channel, fromS, toS, every, limit } = request;
    const afterScan = Number(afterKey(request) ?? 0);
    const query = { channel, fromS, toS, every, afterScan, limit: limit + 1 };
    const rows = await this.reader.traces(runId, query);
    return toPage(
      rows,
      limit,
      ({ scan }) => String(scan),
      ({ scan, tS, atMs, points }) => ({ scan, tS, atMs, points: points.toString('base64') }),
    );
  }

  /** @throws run.not-found, run.no-samples where the run has no such scan */
  async ofScan(runId: string, scan: number): Promise<ScanTraces> {
    await this.records.get(runId);
    const { traces, ...at } = await this.reader.scanTraces(runId, scan);
    return {
      ...at,
      traces: traces.map(({ channel, points }) => ({ channel, points: points.toString('base64') })),
    };
  }
}
