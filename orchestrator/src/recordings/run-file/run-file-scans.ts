import type { RunColumn } from '@cresthold/shared';
import type { DataSource } from 'typeorm';
import { quoted } from './run-file-source.js';

/** Rows that are in memory at once. */
const batchRows = 2000;

/** One scan of a record; NaN where it has no value. Reused from scan to scan: copy what is to be kept. */
export interface RecordedScan {
  tS: number;
  row: Float64Array;
}

/** Every scan of a run in its order, batch by batch: a run of any length takes the same memory. */
export async function* streamScans(
  source: DataSource,
  columns: readonly RunColumn[],
): AsyncGenerator<RecordedScan> {
  const values = columns.map(({ name }, i) => `${quoted(name)} AS c${i}`);
  const sql = `SELECT ${['k', 't_s AS tS', ...values].join(', ')} FROM scan WHERE k > ? ORDER BY k LIMIT ${batchRows}`;
  const scan: RecordedScan = { tS: 0, row: new Float64Array(columns.length) };
  let afterK = -1;
  for (;;) {
    const rows: Record<string, number | null>[] = await source.query(sql, [afterK]);
    for (const row of rows) {
      scan.tS = row.tS ?? NaN;
      for (let i = 0; i < columns.length; i += 1) scan.row[i] = row[`c${i}`] ?? NaN;
      yield scan;
    }
    if (rows.length < batchRows) return;
    afterK = rows.at(-1)?.k ?? afterK;
    // The server's one thread goes on with other requests between two batches.
    await new Promise((resolve) => setImmediate(resolve));
  }
}
