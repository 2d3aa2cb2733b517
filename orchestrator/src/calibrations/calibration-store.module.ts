import { Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { AuditModule } from '../audit/audit.module.js';
import { CalibrationStore } from './calibration-store.js';
import { UnfitCalibrations } from './unfit-calibrations.js';
import { CalibrationCertificateEntity } from './entities/calibration-certificate.entity.js';
import { CalibrationEntity } from './entities/calibration.entity.js';

/** What rigs, rig hosts and runs need of calibrations, apart from `CalibrationsModule`, which needs them in turn. */
@Module({
  imports: [AuditModule, TypeOrmModule.forFeature([CalibrationEntity, CalibrationCertificateEntity])],
  providers: [CalibrationStore, UnfitCalibrations],
  exports: [CalibrationStore, UnfitCalibrations],
})
export class CalibrationStoreModule {}
