import { Module } from '@nestjs/common';
import { AuditModule } from '../audit/audit.module.js';
import { RunReader } from './run-reader.service.js';
import { RunRecords } from './run-records.service.js';
import { RunSealer } from './run-sealer.service.js';

/** The records of runs: rows in the main database and a file for each. */
@Module({
  imports: [AuditModule],
  providers: [RunRecords, RunReader, RunSealer],
  exports: [RunRecords, RunReader],
})
export class RecordingsModule {}
