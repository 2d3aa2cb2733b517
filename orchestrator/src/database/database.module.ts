import { Global, Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { DataFolderLock } from './data-folder-lock.js';
import { dataSourceOptions } from './data-source-options.js';
import { TransactionQueue } from './transaction-queue.js';

@Module({ providers: [DataFolderLock], exports: [DataFolderLock] })
class DataFolderModule {}

@Global()
@Module({
  imports: [
    TypeOrmModule.forRootAsync({
      imports: [DataFolderModule],
      // The lock is asked for so that the database is not touched before it is held.
      inject: [CONFIG, DataFolderLock],
      useFactory: (config: Config) => ({ ...dataSourceOptions(config.dataFolder), retryAttempts: 0 }),
    }),
  ],
  providers: [TransactionQueue],
  exports: [TransactionQueue],
})
export class DatabaseModule {}
