import { mkdirSync } from 'node:fs';
import { Global, Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { dataSourceOptions } from './data-source-options.js';
import { TransactionQueue } from './transaction-queue.js';

@Global()
@Module({
  imports: [
    TypeOrmModule.forRootAsync({
      inject: [CONFIG],
      useFactory: (config: Config) => {
        mkdirSync(config.dataFolder, { recursive: true });
        return { ...dataSourceOptions(config.dataFolder), retryAttempts: 0 };
      },
    }),
  ],
  providers: [TransactionQueue],
  exports: [TransactionQueue],
})
export class DatabaseModule {}
