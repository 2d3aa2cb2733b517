import { Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { AuditModule } from '../audit/audit.module.js';
import { EnvelopeStoreModule } from '../envelopes/envelope-store.module.js';
import { ObjectivesModule } from '../objectives/objectives.module.js';
import { RigStoreModule } from '../rigs/rig-store.module.js';
import { ExperimentVersionEntity } from './entities/experiment-version.entity.js';
import { ExperimentEntity } from './entities/experiment.entity.js';
import { ExperimentStore } from './experiment-store.js';
import { ExperimentsController } from './experiments.controller.js';
import { ExperimentsService } from './experiments.service.js';
import { PreflightService } from './preflight.service.js';

@Module({
  imports: [
    AuditModule,
    EnvelopeStoreModule,
    ObjectivesModule,
    RigStoreModule,
    TypeOrmModule.forFeature([ExperimentEntity, ExperimentVersionEntity]),
  ],
  controllers: [ExperimentsController],
  providers: [ExperimentStore, ExperimentsService, PreflightService],
  exports: [ExperimentStore, ExperimentsService, PreflightService],
})
export class ExperimentsModule {}
