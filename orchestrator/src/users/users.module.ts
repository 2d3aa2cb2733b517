import { Module } from '@nestjs/common';
import { AuditModule } from '../audit/audit.module.js';
import { AuthModule } from '../auth/auth.module.js';
import { UserAccessController } from './user-access.controller.js';
import { UserAccessService } from './user-access.service.js';
import { UserStoreModule } from './user-store.module.js';
import { UsersController } from './users.controller.js';
import { UsersService } from './users.service.js';

@Module({
  imports: [AuditModule, AuthModule, UserStoreModule],
  controllers: [UsersController, UserAccessController],
  providers: [UsersService, UserAccessService],
  exports: [UsersService],
})
export class UsersModule {}
