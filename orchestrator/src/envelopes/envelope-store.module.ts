import { Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { AuditModule } from '../audit/audit.module.js';
import { EnvelopeEntity } from './entities/envelope.entity.js';
import { EnvelopeStore } from './envelope-store.js';
import { EnvelopeWithdrawal } from './envelope-withdrawal.js';

/** What rigs and rig hosts need of envelopes, apart from `EnvelopesModule`, which needs them in turn. */
@Module({
  imports: [AuditModule, TypeOrmModule.forFeature([EnvelopeEntity])],
  providers: [EnvelopeStore, EnvelopeWithdrawal],
  exports: [EnvelopeStore, EnvelopeWithdrawal],
})
export class EnvelopeStoreModule {}
