import { Module } from '@nestjs/common';
import { AuditModule } from '../audit/audit.module.js';
import { CalibrationStoreModule } from '../calibrations/calibration-store.module.js';
import { EnvelopeStoreModule } from '../envelopes/envelope-store.module.js';
import { ProofTestStoreModule } from '../proof-tests/proof-test-store.module.js';
import { RecordingsModule } from '../recordings/recordings.module.js';
import { RigHostsModule } from '../rig-hosts/rig-hosts.module.js';
import { RigStoreModule } from '../rigs/rig-store.module.js';
import { RunDataController } from './run-data.controller.js';
import { RunOrders } from './run-orders.service.js';
import { RunStarter } from './run-start.service.js';
import { RunTracesController } from './run-traces.controller.js';
import { RunTraces } from './run-traces.service.js';
import { RunsController } from './runs.controller.js';
import { RunsService } from './runs.service.js';

@Module({
  imports: [
    AuditModule,
    CalibrationStoreModule,
    EnvelopeStoreModule,
    ProofTestStoreModule,
    RecordingsModule,
    RigHostsModule,
    RigStoreModule,
  ],
  controllers: [RunsController, RunDataController, RunTracesController],
  providers: [RunOrders, RunStarter, RunsService, RunTraces],
})
export class RunsModule {}
