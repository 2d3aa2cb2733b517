import { Injectable, Logger, type ExecutionContext } from '@nestjs/common';
import { Reflector } from '@nestjs/core';
import { AuthGuard } from '@nestjs/passport';
import { DomainError, type Role } from '@cresthold/shared';
import type { Request } from 'express';
import { ACCESS, type Access } from './access.decorator.js';
import { sessionStrategyName } from './session.strategy.js';
import type { SignedInUser } from './signed-in-user.js';

/** Lets a request through only where its route's statement allows its sender; no statement, no way in. */
@Injectable()
export class RolesGuard extends AuthGuard(sessionStrategyName) {
  private readonly logger = new Logger(RolesGuard.name);

  constructor(private readonly reflector: Reflector) {
    super();
  }

  override async canActivate(context: ExecutionContext): Promise<boolean> {
    const access = this.reflector.getAllAndOverride<Access[] | undefined>(ACCESS, [
      context.getHandler(),
      context.getClass(),
    ]);
    if (access === undefined) {
      this.logger.error(`${context.getClass().name}.${context.getHandler().name} states no roles: refused.`);
      throw new DomainError('auth.forbidden');
    }
    if (access.includes('anyone')) return true;
    // A socket was authenticated at its handshake and is told apart there.
    if (context.getType() === 'ws') return access.includes('signed-in');
    await super.canActivate(context);
    const { user } = context.switchToHttp().getRequest<Request & { user: SignedInUser }>();
    if (!isAllowed(access, user.roles)) throw new DomainError('auth.forbidden', refusal(access));
    return true;
  }

  override handleRequest<User>(error: unknown, user: User | false): User {
    if (error !== null && error !== undefined) throw error as Error;
    if (user === false) throw new DomainError('auth.required');
    return user;
  }
}

function isAllowed(access: readonly Access[], roles: readonly Role[]): boolean {
  return access.includes('signed-in') || roles.some((role) => access.includes(role));
}

function refusal(access: readonly Access[]): string {
  return `Your role may not do this: it needs ${access.join(' or ')}.`;
}
