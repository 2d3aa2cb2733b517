import { DomainError, runEventBodySchema, type RunColumn, type RunEvent } from '@cresthold/shared';
import type { DataSource } from 'typeorm';
import { runEndSchema, runManifestSchema, type StoredManifest } from './run-file.types.js';
import { streamScans, type RecordedScan } from './run-file-scans.js';
import { openRunFileSource } from './run-file-source.js';
import {
  queryScanTraces,
  queryTraces,
  traceChannels,
  type RecordedTrace,
  type TraceChannel,
  type TracesQuery,
} from './run-file-traces.js';
import { querySamples, type Samples, type SamplesQuery } from './run-file-samples.js';

export interface LastScan {
  k: number;
  tS: number;
  atMs: number;
}

/** Reads a run file: while it is written, after its end, and after a crash. */
export class RunFileReader {
  private constructor(private readonly source: DataSource) {}

  /**
   * @throws run.no-samples where there is no such file or it has no samples table
   */
  static async open(file: string): Promise<RunFileReader> {
    let source: DataSource;
    try {
      source = await openRunFileSource(file, 'read');
    } catch (cause) {
      throw new DomainError('run.no-samples', undefined, [], { cause });
    }
    const tables: unknown[] = await source.query(
      `SELECT name FROM sqlite_master WHERE type = 'table' AND name = 'scan'`,
    );
    if (tables.length > 0) return new RunFileReader(source);
    await source.destroy();
    throw new DomainError('run.no-samples');
  }

  async manifest(): Promise<StoredManifest> {
    const rows: { name: string; value: string }[] = await this.source.query(
      'SELECT name, value FROM manifest',
    );
    const entries = Object.fromEntries(rows.map((row) => [row.name, JSON.parse(row.value) as unknown]));
    const end = entries.end === undefined ? null : runEndSchema.parse(entries.end);
    return { ...runManifestSchema.parse(entries), end };
  }

  async columns(): Promise<RunColumn[]> {
    return (await this.manifest()).columns;
  }

  /** The last scan that reached the file, or null where there is none yet. */
  async lastScan(): Promise<LastScan | null> {
    const rows: LastScan[] = await this.source.query(
      'SELECT k, t_s AS tS, at_ms AS atMs FROM scan ORDER BY k DESC LIMIT 1',
    );
    return rows[0] ?? null;
  }

  async scanCount(): Promise<number> {
    const rows: { n: number }[] = await this.source.query('SELECT count(*) AS n FROM scan');
    return rows[0]?.n ?? 0;
  }

  /** Events with a sequence number above `afterSequence`, in order. */
  async events(afterSequence = 0): Promise<RunEvent[]> {
    const rows: { sequence: number; tS: number; at: string; body: string }[] = await this.source.query(
      'SELECT sequence, t_s AS tS, at, body FROM event WHERE sequence > ? ORDER BY sequence',
      [afterSequence],
    );
    return rows.map(({ sequence, tS, at, body }) => ({
      sequence,
      tS,
      at,
      body: runEventBodySchema.parse(JSON.parse(body)),
    }));
  }

  /**
   * Samples over a span: the exact rows where they are few enough, else buckets whose minimum and
   * maximum are those of all rows in them.
   *
   * @throws request.invalid naming a column that the run does not have
   */
  async samples(query: SamplesQuery): Promise<Samples> {
    return querySamples(this.source, await this.columns(), query);
  }

  /** Every scan in its order, without holding the run; the scan is reused. */
  scans(columns: readonly RunColumn[]): AsyncGenerator<RecordedScan> {
    return streamScans(this.source, columns);
  }

  /** The channels whose traces the run records. */
  async traceChannels(): Promise<TraceChannel[]> {
    return traceChannels((await this.manifest()).rig);
  }

  /**
   * Traces of one channel, in the order of their scans.
   *
   * @throws request.invalid where the run has no such trace channel
   */
  async traces(query: TracesQuery): Promise<RecordedTrace[]> {
    const ids = (await this.traceChannels()).map(({ id }) => id);
    if (ids.includes(query.channel)) return queryTraces(this.source, query);
    const have = ids.length === 0 ? 'it has none' : `choose from ${ids.join(', ')}`;
    const message = `The run has no trace channel "${query.channel}": ${have}.`;
    throw new DomainError('request.invalid', undefined, [{ field: 'channel', message }]);
  }

  /** @throws run.no-samples where the run has no such scan */
  scanTraces(scan: number): ReturnType<typeof queryScanTraces> {
    return queryScanTraces(this.source, scan);
  }

  async close(): Promise<void> {
    await this.source.destroy();
  }
}
