import Database from 'better-sqlite3';

export interface RunFileFacts {
  isIntact: boolean;
  scans: number;
  /** Wall time of the last scan, ms since 1970. */
  lastAtMs: number;
  /** Longest time between two neighbouring scans before `untilMs`, ms. */
  longestGapMs: number;
}

/** What plain SQL says of a run file: nothing of the product is used to open it. */
export function runFileFacts(file: string, untilMs: number): RunFileFacts {
  const database = new Database(file, { readonly: true });
  try {
    const [integrity] = database.pragma('integrity_check') as { integrity_check: string }[];
    const { scans, lastAtMs } = database
      .prepare('SELECT count(*) AS scans, max(at_ms) AS lastAtMs FROM scan')
      .get() as { scans: number; lastAtMs: number };
    const { longestGapMs } = database
      .prepare(
        `SELECT max(gap) AS longestGapMs FROM
           (SELECT at_ms - lag(at_ms) OVER (ORDER BY k) AS gap FROM scan WHERE at_ms <= ?)`,
      )
      .get(untilMs) as { longestGapMs: number };
    return { isIntact: integrity?.integrity_check === 'ok', scans, lastAtMs, longestGapMs };
  } finally {
    database.close();
  }
}
