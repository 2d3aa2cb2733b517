import { Module } from '@nestjs/common';
import { AdaptersModule } from '../adapters/adapters.module.js';
import { AuditModule } from '../audit/audit.module.js';
import { CalibrationStoreModule } from '../calibrations/calibration-store.module.js';
import { EnvelopeStoreModule } from '../envelopes/envelope-store.module.js';
import { RigStoreModule } from './rig-store.module.js';
import { RigsController } from './rigs.controller.js';
import { RigsService } from './rigs.service.js';

@Module({
  imports: [AdaptersModule, AuditModule, CalibrationStoreModule, EnvelopeStoreModule, RigStoreModule],
  controllers: [RigsController],
  providers: [RigsService],
  exports: [RigsService],
})
export class RigsModule {}
