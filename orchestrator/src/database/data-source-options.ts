import { join } from 'node:path';
import type { DataSourceOptions } from 'typeorm';
import { entities } from './entities.js';
import { migrations } from './migrations/index.js';

/** What this code needs of better-sqlite3's database object. */
interface PragmaTarget {
  pragma(text: string): unknown;
}

/** Path of the main database in a data folder. */
export function databaseFile(dataFolder: string): string {
  return join(dataFolder, 'cresthold.sqlite');
}

/** The one place that says how the main database is opened, for the server and for TypeORM's command line. */
export function dataSourceOptions(dataFolder: string): DataSourceOptions {
  return {
    type: 'better-sqlite3',
    database: databaseFile(dataFolder),
    entities,
    migrations,
    migrationsRun: true,
    synchronize: false,
    enableWAL: true,
    prepareDatabase: (database: PragmaTarget) => {
      database.pragma('busy_timeout = 5000');
      // A committed trip or approval must survive a power cut; WAL's default could lose the last ones.
      database.pragma('synchronous = FULL');
    },
  };
}
