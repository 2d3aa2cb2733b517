import { DomainError, type RunColumn } from '@cresthold/shared';
import type { DataSource } from 'typeorm';
import { quoted } from './run-file-source.js';

export interface SamplesQuery {
  /** Column names; empty for all. */
  columns: readonly string[];
  /** Ends of the span, s since the run began, both included; missing is open. */
  fromS?: number;
  toS?: number;
  /** Greatest number of points per column; at least 1. */
  points: number;
}

/** Column-major: `mean[c][i]` belongs to `columns[c]` and `tS[i]`. Null where no row was good. */
export interface Samples {
  columns: string[];
  /** True where each point is one scan; mean, minimum and maximum are then the same. */
  isExact: boolean;
  tS: number[];
  mean: (number | null)[][];
  min: (number | null)[][];
  max: (number | null)[][];
}

interface RowSpan {
  firstK: number;
  lastK: number;
}

type SampleRow = Record<string, number | null>;

export async function querySamples(
  source: DataSource,
  known: readonly RunColumn[],
  query: SamplesQuery,
): Promise<Samples> {
  const columns = chosenColumns(known, query.columns);
  const span = await rowSpan(source, query.fromS ?? -Infinity, query.toS ?? Infinity);
  const count = span === null ? 0 : span.lastK - span.firstK + 1;
  const isExact = count <= query.points;
  if (span === null) return collect(columns, true, []);
  const sql = isExact ? exactSql(columns) : bucketSql(columns);
  const parameters = isExact
    ? [span.firstK, span.lastK]
    : [span.firstK, Math.floor(query.points), count, span.firstK, span.lastK];
  const rows: SampleRow[] = await source.query(sql, parameters);
  return collect(columns, isExact, rows);
}

function chosenColumns(known: readonly RunColumn[], wanted: readonly string[]): string[] {
  const names = known.map((column) => column.name);
  const unknown = wanted.filter((name) => !names.includes(name));
  if (unknown.length === 0) return wanted.length > 0 ? [...wanted] : names;
  throw new DomainError(
    'request.invalid',
    undefined,
    unknown.map((name) => ({
      field: 'columns',
      message: `The run has no column "${name}": choose from ${names.join(', ')}.`,
    })),
  );
}

const exactSql = (columns: readonly string[]): string => {
  const values = columns.map((name, i) => `${quoted(name)} AS mean${i}`);
  return `SELECT ${['t_s AS tS', ...values].join(', ')} FROM scan WHERE k BETWEEN ? AND ? ORDER BY k`;
};

/** Integer division puts row j of n into bucket j × points / n: exactly `points` buckets, none empty. */
const bucketSql = (columns: readonly string[]): string => {
  const values = columns.map((name, i) => {
    const column = quoted(name);
    return `avg(${column}) AS mean${i}, min(${column}) AS min${i}, max(${column}) AS max${i}`;
  });
  return `SELECT ${['avg(t_s) AS tS', ...values].join(', ')} FROM scan
    CROSS JOIN (SELECT CAST(? AS INTEGER) AS firstK, CAST(? AS INTEGER) AS points, CAST(? AS INTEGER) AS n)
    WHERE k BETWEEN ? AND ? GROUP BY (k - firstK) * points / n ORDER BY 1`;
};

function collect(columns: string[], isExact: boolean, rows: readonly SampleRow[]): Samples {
  const column = (kind: string) => columns.map((_, i) => rows.map((row) => row[`${kind}${i}`] ?? null));
  const mean = column('mean');
  return {
    columns,
    isExact,
    tS: rows.map((row) => row.tS ?? NaN),
    mean,
    min: isExact ? mean : column('min'),
    max: isExact ? mean : column('max'),
  };
}

/** The rows of a span of time. Time grows with k, so a search by halves needs no index beside the key. */
export async function rowSpan(source: DataSource, fromS: number, toS: number): Promise<RowSpan | null> {
  const ends: { firstK: number | null; lastK: number | null }[] = await source.query(
    'SELECT (SELECT min(k) FROM scan) AS firstK, (SELECT max(k) FROM scan) AS lastK',
  );
  const { firstK, lastK } = ends[0] ?? { firstK: null, lastK: null };
  if (firstK === null || lastK === null) return null;
  const from = await firstKWhere(source, firstK, lastK, (tS) => tS >= fromS);
  const to = (await firstKWhere(source, firstK, lastK, (tS) => tS > toS)) - 1;
  return from > to ? null : { firstK: from, lastK: to };
}

/** Least k in [firstK, lastK] for whose time `holds`, or lastK + 1; `holds` stays true once it is. */
async function firstKWhere(
  source: DataSource,
  firstK: number,
  lastK: number,
  holds: (tS: number) => boolean,
): Promise<number> {
  let low = firstK;
  let high = lastK + 1;
  while (low < high) {
    const middle = Math.floor((low + high) / 2);
    const rows: { tS: number }[] = await source.query('SELECT t_s AS tS FROM scan WHERE k = ?', [middle]);
    if (holds(rows[0]?.tS ?? Infinity)) high = middle;
    else low = middle + 1;
  }
  return low;
}
