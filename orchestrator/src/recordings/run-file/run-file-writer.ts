import type { RunColumn, RunEvent } from '@cresthold/shared';
import type { DataSource } from 'typeorm';
import { foldLog, inTransaction, openRunFileSource, quoted } from './run-file-source.js';
import { insertTraces, traceChannels, traceTableSql } from './run-file-traces.js';
import { rowLead, type ScanBatch } from './scan-batch.js';
import type { TraceBatch } from './trace-batch.js';
import type { RunEnd, RunManifest } from './run-file.types.js';

/** SQLite takes at most 32 766 parameters in one statement. */
const parametersMax = 32_000;
/** Sizes of multi-row statements, so that a handful of prepared statements serves every batch. */
const statementRows = [64, 16, 4, 1];

/** Writes one run file. Calls must not overlap: one connection has one transaction. */
export class RunFileWriter {
  private columnCount = 0;
  private traceIds: string[] = [];
  private insertHead = '';
  private scans = 0;

  private constructor(private readonly source: DataSource) {}

  /** Creates the file with the tables that do not depend on the run; fails where it exists already. */
  static async create(file: string): Promise<RunFileWriter> {
    const source = await openRunFileSource(file, 'write');
    try {
      await inTransaction(source, async () => {
        await source.query(
          'CREATE TABLE event (sequence INTEGER PRIMARY KEY, t_s REAL NOT NULL, at TEXT NOT NULL, type TEXT NOT NULL, body TEXT NOT NULL)',
        );
        await source.query('CREATE TABLE manifest (name TEXT PRIMARY KEY, value TEXT NOT NULL)');
        await source.query(traceTableSql);
      });
    } catch (error) {
      await source.destroy();
      throw error;
    }
    return new RunFileWriter(source);
  }

  /** Creates table `scan` with one column per run column and records the manifest. */
  async begin(manifest: RunManifest): Promise<void> {
    this.columnCount = manifest.columns.length;
    this.traceIds = traceChannels(manifest.rig).map(({ id }) => id);
    const names = manifest.columns.map((column) => quoted(column.name));
    this.insertHead = `INSERT INTO scan (${['k', 't_s', 'at_ms', 'step', ...names].join(', ')}) VALUES `;
    await inTransaction(this.source, async () => {
      await this.source.query(createScanTable(manifest.columns));
      for (const [name, value] of Object.entries(manifest)) await this.putManifest(name, value);
    });
  }

  /** Appends rows, traces and events, all or nothing. */
  async append(
    batch: ScanBatch,
    events: readonly RunEvent[],
    traces: TraceBatch | null = null,
  ): Promise<void> {
    await inTransaction(this.source, async () => {
      await this.insertRows(batch);
      if (traces) await insertTraces(this.source, traces, this.traceIds);
      for (const event of events) await this.insertEvent(event);
    });
    this.scans += batch.rows;
  }

  /** Records how the run ended, and leaves one file without a log beside it where nobody reads it. */
  async end(end: Omit<RunEnd, 'scans'>): Promise<RunEnd> {
    const complete: RunEnd = { ...end, scans: this.scans };
    await inTransaction(this.source, () => this.putManifest('end', complete));
    await this.close();
    return complete;
  }

  /** Closes without an end record. */
  async close(): Promise<void> {
    await foldLog(this.source);
    await this.source.destroy();
  }

  private async insertRows(batch: ScanBatch): Promise<void> {
    const width = 4 + this.columnCount;
    let row = 0;
    while (row < batch.rows) {
      const left = batch.rows - row;
      const size = statementRows.find((n) => n <= left && n * width <= parametersMax) ?? 1;
      const tuple = `(${Array<string>(width).fill('?').join(',')})`;
      const sql = this.insertHead + Array<string>(size).fill(tuple).join(',');
      await this.source.query(sql, rowParameters(batch, row, size, this.columnCount));
      row += size;
    }
  }

  private async insertEvent(event: RunEvent): Promise<void> {
    const { sequence, tS, at, body } = event;
    await this.source.query('INSERT INTO event (sequence, t_s, at, type, body) VALUES (?, ?, ?, ?, ?)', [
      sequence,
      tS,
      at,
      body.type,
      JSON.stringify(body),
    ]);
  }

  private async putManifest(name: string, value: unknown): Promise<void> {
    await this.source.query('INSERT INTO manifest (name, value) VALUES (?, ?)', [
      name,
      JSON.stringify(value ?? null),
    ]);
  }
}

function createScanTable(columns: readonly RunColumn[]): string {
  const values = columns.map((column) => `${quoted(column.name)} REAL`);
  return `CREATE TABLE scan (${[
    'k INTEGER PRIMARY KEY',
    't_s REAL NOT NULL',
    'at_ms INTEGER NOT NULL',
    'step TEXT',
    ...values,
  ].join(', ')})`;
}

/** The parameters of `size` rows from `first`; what is not finite becomes NULL. */
function rowParameters(batch: ScanBatch, first: number, size: number, columnCount: number): unknown[] {
  const width = rowLead + columnCount;
  const parameters: unknown[] = [];
  for (let row = first; row < first + size; row += 1) {
    const at = row * width;
    for (let i = 0; i < 3; i += 1) parameters.push(batch.data[at + i]);
    parameters.push(batch.labels[batch.data[at + 3] ?? -1] ?? null);
    for (let i = rowLead; i < width; i += 1) {
      const value = batch.data[at + i];
      parameters.push(Number.isFinite(value) ? value : null);
    }
  }
  return parameters;
}
