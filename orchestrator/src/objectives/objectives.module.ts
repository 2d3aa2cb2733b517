import { Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { AuditModule } from '../audit/audit.module.js';
import { RigStoreModule } from '../rigs/rig-store.module.js';
import { ObjectiveEntity } from './entities/objective.entity.js';
import { ObjectiveStore } from './objective-store.js';
import { ObjectivesController } from './objectives.controller.js';
import { ObjectivesService } from './objectives.service.js';

@Module({
  imports: [AuditModule, RigStoreModule, TypeOrmModule.forFeature([ObjectiveEntity])],
  controllers: [ObjectivesController],
  providers: [ObjectiveStore, ObjectivesService],
  exports: [ObjectiveStore, ObjectivesService],
})
export class ObjectivesModule {}
