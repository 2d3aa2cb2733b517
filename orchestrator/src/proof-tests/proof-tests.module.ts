import { Module } from '@nestjs/common';
import { AuditModule } from '../audit/audit.module.js';
import { EnvelopeStoreModule } from '../envelopes/envelope-store.module.js';
import { RigStoreModule } from '../rigs/rig-store.module.js';
import { ProofTestResponses } from './proof-test-responses.service.js';
import { ProofTestStoreModule } from './proof-test-store.module.js';
import { ProofTestsController } from './proof-tests.controller.js';
import { ProofTestsService } from './proof-tests.service.js';

@Module({
  imports: [AuditModule, EnvelopeStoreModule, ProofTestStoreModule, RigStoreModule],
  controllers: [ProofTestsController],
  providers: [ProofTestsService, ProofTestResponses],
})
export class ProofTestsModule {}
