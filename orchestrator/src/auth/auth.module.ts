import { Module } from '@nestjs/common';
import { APP_GUARD } from '@nestjs/core';
import { JwtModule } from '@nestjs/jwt';
import { PassportModule } from '@nestjs/passport';
import { AuditModule } from '../audit/audit.module.js';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { UserStoreModule } from '../users/user-store.module.js';
import { AuthController } from './auth.controller.js';
import { AuthService } from './auth.service.js';
import { RolesGuard } from './roles.guard.js';
import { loadSessionSecret } from './session-secret.js';
import { SessionStrategy } from './session.strategy.js';
import { SESSION_SECRET, SessionsService } from './sessions.service.js';
import { SignInThrottle } from './sign-in-throttle.js';

@Module({
  imports: [AuditModule, UserStoreModule, PassportModule, JwtModule.register({})],
  controllers: [AuthController],
  providers: [
    AuthService,
    SessionsService,
    SessionStrategy,
    SignInThrottle,
    {
      provide: SESSION_SECRET,
      inject: [CONFIG],
      useFactory: (config: Config) => loadSessionSecret(config.dataFolder),
    },
    { provide: APP_GUARD, useClass: RolesGuard },
  ],
  exports: [SessionsService, SignInThrottle],
})
export class AuthModule {}
