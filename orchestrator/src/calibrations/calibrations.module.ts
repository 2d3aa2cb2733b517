import { Module } from '@nestjs/common';
import { AuditModule } from '../audit/audit.module.js';
import { EnvelopeStoreModule } from '../envelopes/envelope-store.module.js';
import { RigStoreModule } from '../rigs/rig-store.module.js';
import { CalibrationStoreModule } from './calibration-store.module.js';
import { CalibrationsController } from './calibrations.controller.js';
import { CalibrationsService } from './calibrations.service.js';
import { CertificatesService } from './certificates.service.js';

@Module({
  imports: [AuditModule, CalibrationStoreModule, EnvelopeStoreModule, RigStoreModule],
  controllers: [CalibrationsController],
  providers: [CalibrationsService, CertificatesService],
})
export class CalibrationsModule {}
