import { DataSource } from 'typeorm';

/** The part of better-sqlite3's handle that is used before TypeORM takes over. */
interface PragmaHandle {
  pragma(text: string): unknown;
}

/**
 * How long a statement waits for a lock of another process, ms. Reading needs no lock in WAL mode, and
 * the server's only thread must not stand still for one.
 */
const busyTimeoutMs = { write: 1000, read: 50 };

/**
 * Opens a run file through TypeORM. There are no entities: each run file has columns of its own.
 *
 * A file being written is in WAL mode, so that readers never wait for the recorder. `NORMAL` leaves the
 * last commits to the operating system: they survive the death of any process, not a power cut.
 */
export async function openRunFileSource(file: string, use: 'write' | 'read'): Promise<DataSource> {
  const isReading = use === 'read';
  const source = new DataSource({
    type: 'better-sqlite3',
    database: file,
    synchronize: false,
    fileMustExist: isReading,
    enableWAL: !isReading,
    statementCacheSize: 32,
    prepareDatabase: (database: unknown) => {
      const handle = database as PragmaHandle;
      handle.pragma(`busy_timeout = ${busyTimeoutMs[use]}`);
      handle.pragma('synchronous = NORMAL');
    },
  });
  return source.initialize();
}

/** Runs `work` in one transaction; the caller sees to it that nothing else uses the source meanwhile. */
export async function inTransaction<T>(source: DataSource, work: () => Promise<T>): Promise<T> {
  await source.query('BEGIN IMMEDIATE');
  try {
    const result = await work();
    await source.query('COMMIT');
    return result;
  } catch (error) {
    await source.query('ROLLBACK').catch(() => undefined);
    throw error;
  }
}

/**
 * Folds the write-ahead log into the file and takes the file out of WAL mode, so that it stands alone and
 * reading it never again writes beside it.
 *
 * @returns false where somebody else has the file open: it is complete, but keeps its log beside it
 */
export async function foldLog(source: DataSource): Promise<boolean> {
  try {
    await source.query('PRAGMA wal_checkpoint(TRUNCATE)');
    const modes: { journal_mode: string }[] = await source.query('PRAGMA journal_mode = DELETE');
    return modes[0]?.journal_mode === 'delete';
  } catch (error) {
    if (error instanceof Error && error.message.includes('locked')) return false;
    throw error;
  }
}

/** A name as an SQL identifier, e.g. `airTrim.applied` as `"airTrim.applied"`. */
export const quoted = (name: string): string => `"${name.replaceAll('"', '""')}"`;
