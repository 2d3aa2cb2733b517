import { endianness } from 'node:os';
import { DomainError, type Channel, type Rig } from '@cresthold/shared';
import type { DataSource } from 'typeorm';
import { rowSpan } from './run-file-samples.js';
import { traceLead, type TraceBatch } from './trace-batch.js';

export type TraceChannel = Extract<Channel, { kind: 'trace' }>;

export interface TracesQuery {
  channel: string;
  /** Ends of the span, s since the run began, both included; missing is open. */
  fromS?: number | undefined;
  toS?: number | undefined;
  /** Every so many scans only, from the first one on; 1 for all. */
  every: number;
  /** Only scans after this one. */
  afterScan: number;
  limit: number;
}

/** One trace of one scan. */
export interface RecordedTrace {
  scan: number;
  /** Time since the run began, s. */
  tS: number;
  /** Wall time, ms since 1970. */
  atMs: number;
  channel: string;
  /** Little-endian Float32, as it stands in the file. */
  points: Buffer;
}

/**
 * Arrays of the scans: `points` are little-endian Float32. A scan in which a trace was not good has no row here.
 */
export const traceTableSql =
  'CREATE TABLE trace (k INTEGER NOT NULL, channel TEXT NOT NULL, points BLOB NOT NULL, PRIMARY KEY (channel, k))';

/** The channels of a rig that are traces, in its order. */
export function traceChannels(rig: Rig): TraceChannel[] {
  return rig.channels.flatMap((channel) => (channel.kind === 'trace' ? [channel] : []));
}

/** Writes the traces of a batch; the caller has the transaction. */
export async function insertTraces(
  source: DataSource,
  { heads, points, count }: TraceBatch,
  channels: readonly string[],
): Promise<void> {
  let from = 0;
  for (let at = 0; at < count * traceLead; at += traceLead) {
    const [k = 0, channel = 0, length = 0] = heads.subarray(at, at + traceLead);
    const bytes = Buffer.from(points.buffer, points.byteOffset + 4 * from, 4 * length);
    await source.query('INSERT INTO trace (k, channel, points) VALUES (?, ?, ?)', [
      k,
      channels[channel] ?? '',
      endianness() === 'LE' ? bytes : Buffer.from(bytes).swap32(),
    ]);
    from += length;
  }
}

/** Traces of one channel in the order of their scans; none in a file from before traces were recorded. */
export async function queryTraces(source: DataSource, query: TracesQuery): Promise<RecordedTrace[]> {
  const span = await rowSpan(source, query.fromS ?? -Infinity, query.toS ?? Infinity);
  if (span === null || !(await hasTraces(source))) return [];
  return source.query(
    `${selectSql} WHERE channel = ? AND trace.k BETWEEN ? AND ? AND (trace.k - 1) % ? = 0 ORDER BY trace.k LIMIT ?`,
    [query.channel, Math.max(span.firstK, query.afterScan + 1), span.lastK, query.every, query.limit],
  );
}

/**
 * The traces of one scan.
 *
 * @throws run.no-samples where the file has no such scan
 */
export async function queryScanTraces(
  source: DataSource,
  scan: number,
): Promise<Pick<RecordedTrace, 'scan' | 'tS' | 'atMs'> & { traces: RecordedTrace[] }> {
  const rows: { tS: number; atMs: number }[] = await source.query(
    'SELECT t_s AS tS, at_ms AS atMs FROM scan WHERE k = ?',
    [scan],
  );
  const [row] = rows;
  if (!row) throw new DomainError('run.no-samples', `The run has no scan ${scan}.`);
  const traces: RecordedTrace[] = (await hasTraces(source))
    ? await source.query(`${selectSql} WHERE trace.k = ? ORDER BY channel`, [scan])
    : [];
  return { scan, ...row, traces };
}

const selectSql = `SELECT trace.k AS scan, t_s AS tS, at_ms AS atMs, channel, points
  FROM trace JOIN scan ON scan.k = trace.k`;

async function hasTraces(source: DataSource): Promise<boolean> {
  const tables: unknown[] = await source.query(
    `SELECT name FROM sqlite_master WHERE type = 'table' AND name = 'trace'`,
  );
  return tables.length > 0;
}
