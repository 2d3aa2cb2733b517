import { Module } from '@nestjs/common';
import { AuditModule } from '../audit/audit.module.js';
import { RigStoreModule } from '../rigs/rig-store.module.js';
import { EnvelopeDecisionsService } from './envelope-decisions.service.js';
import { EnvelopeDraftsService } from './envelope-drafts.service.js';
import { EnvelopeStoreModule } from './envelope-store.module.js';
import { EnvelopesController } from './envelopes.controller.js';

@Module({
  imports: [AuditModule, EnvelopeStoreModule, RigStoreModule],
  controllers: [EnvelopesController],
  providers: [EnvelopeDraftsService, EnvelopeDecisionsService],
  exports: [EnvelopeDraftsService, EnvelopeDecisionsService],
})
export class EnvelopesModule {}
