import { Module } from '@nestjs/common';
import { APP_GUARD } from '@nestjs/core';
import { TypeOrmModule } from '@nestjs/typeorm';
import { AuditModule } from '../audit/audit.module.js';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { UserStoreModule } from '../users/user-store.module.js';
import { AuthController } from './auth.controller.js';
import { AuthService } from './auth.service.js';
import { Credentials } from './credentials.service.js';
import { SecondFactorEntity } from './entities/second-factor.entity.js';
import { SessionEntity } from './entities/session.entity.js';
import { RigsOfRequest } from './rigs-of-request.js';
import { RolesGuard } from './roles.guard.js';
import { loadSealingKey } from './sealed-secret.js';
import { SecondFactorController } from './second-factor.controller.js';
import { SecondFactorService } from './second-factor.service.js';
import { SEALING_KEY, SecondFactors } from './second-factors.service.js';
import { SessionsController } from './sessions.controller.js';
import { SessionsService } from './sessions.service.js';
import { SignInThrottle } from './sign-in-throttle.js';

@Module({
  imports: [AuditModule, UserStoreModule, TypeOrmModule.forFeature([SessionEntity, SecondFactorEntity])],
  controllers: [AuthController, SessionsController, SecondFactorController],
  providers: [
    AuthService,
    Credentials,
    RigsOfRequest,
    SecondFactorService,
    SecondFactors,
    SessionsService,
    SignInThrottle,
    {
      provide: SEALING_KEY,
      inject: [CONFIG],
      useFactory: (config: Config) => loadSealingKey(config.dataFolder),
    },
    { provide: APP_GUARD, useClass: RolesGuard },
  ],
  exports: [SecondFactors, SessionsService, SignInThrottle],
})
export class AuthModule {}
