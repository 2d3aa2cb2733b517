import { Module } from '@nestjs/common';
import { AuthModule } from '../auth/auth.module.js';
import { UserStoreModule } from '../users/user-store.module.js';
import { UsersModule } from '../users/users.module.js';
import { SetupController } from './setup.controller.js';
import { SetupService } from './setup.service.js';

@Module({
  imports: [AuthModule, UserStoreModule, UsersModule],
  controllers: [SetupController],
  providers: [SetupService],
})
export class SetupModule {}
