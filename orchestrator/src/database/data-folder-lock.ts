import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { Inject, Injectable, type OnApplicationShutdown } from '@nestjs/common';
import Database from 'better-sqlite3';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';

/** Another program works on the data folder. */
export class DataFolderInUseError extends Error {
  constructor(dataFolder: string) {
    super(`Another server works on the data folder ${dataFolder}: end it first, or set CRESTHOLD_DATA.`);
    this.name = 'DataFolderInUseError';
  }
}

/**
 * Keeps a second server away from a data folder, since two would drive the same rigs. It is a lock that
 * SQLite holds on a file of its own: the operating system lets it go when this process ends, however it ends,
 * so that none is ever left behind.
 */
@Injectable()
export class DataFolderLock implements OnApplicationShutdown {
  private readonly file: Database.Database;

  /** @throws DataFolderInUseError */
  constructor(@Inject(CONFIG) { dataFolder }: Config) {
    mkdirSync(dataFolder, { recursive: true });
    this.file = new Database(join(dataFolder, 'server-lock.sqlite'), { timeout: 0 });
    try {
      this.file.exec('BEGIN EXCLUSIVE');
    } catch (error) {
      this.file.close();
      if (error instanceof Database.SqliteError && error.code === 'SQLITE_BUSY') {
        throw new DataFolderInUseError(dataFolder);
      }
      throw error;
    }
  }

  onApplicationShutdown(): void {
    this.file.close();
  }
}
