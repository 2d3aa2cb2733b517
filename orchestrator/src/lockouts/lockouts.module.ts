import { Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { AuditModule } from '../audit/audit.module.js';
import { RigHostsModule } from '../rig-hosts/rig-hosts.module.js';
import { RigLockoutEntity } from '../rigs/entities/rig-lockout.entity.js';
import { RigStoreModule } from '../rigs/rig-store.module.js';
import { UserStoreModule } from '../users/user-store.module.js';
import { LockoutsController } from './lockouts.controller.js';
import { LockoutsService } from './lockouts.service.js';

@Module({
  imports: [
    AuditModule,
    RigHostsModule,
    RigStoreModule,
    TypeOrmModule.forFeature([RigLockoutEntity]),
    UserStoreModule,
  ],
  controllers: [LockoutsController],
  providers: [LockoutsService],
})
export class LockoutsModule {}
