import { Injectable, Logger, type CanActivate, type ExecutionContext } from '@nestjs/common';
import { Reflector } from '@nestjs/core';
import { DomainError, type Role } from '@cresthold/shared';
import type { Request } from 'express';
import { ACCESS, EMERGENCY, REAUTHENTICATION, type Access } from './access.decorator.js';
import { isInScope, rigScopeOf, type RigScope } from './rig-scope.js';
import { RigsOfRequest } from './rigs-of-request.js';
import { SessionsService, type LiveSession } from './sessions.service.js';
import type { SignedInUser } from './signed-in-user.js';

/** A page sends it with what it asks for by itself while nobody is at it. */
export const unattendedHeader = 'x-unattended';

type Authenticated = Request & { user: SignedInUser; rigScope: RigScope };

/**
 * Lets a request through only where its route's statement allows its sender, on the rigs that it is about;
 * no statement, no way in.
 */
@Injectable()
export class RolesGuard implements CanActivate {
  private readonly logger = new Logger(RolesGuard.name);

  constructor(
    private readonly reflector: Reflector,
    private readonly sessions: SessionsService,
    private readonly rigs: RigsOfRequest,
  ) {}

  async canActivate(context: ExecutionContext): Promise<boolean> {
    const access = this.stated<Access[]>(ACCESS, context);
    if (access === undefined) {
      this.logger.error(`${context.getClass().name}.${context.getHandler().name} states no roles: refused.`);
      throw new DomainError('auth.forbidden');
    }
    if (access.includes('anyone')) return true;
    // A socket was authenticated at its handshake and is told apart there.
    if (context.getType() === 'ws') return access.includes('signed-in');
    const request = context.switchToHttp().getRequest<Authenticated>();
    const isEmergency = this.stated<boolean>(EMERGENCY, context) === true;
    const session = await this.sessionOf(request, isEmergency);
    request.user = session.user;
    try {
      await this.authorise(request, access, context, session);
    } catch (error) {
      if (error instanceof DomainError) this.logger.warn(refused(request, error));
      throw error;
    }
    return true;
  }

  /** @throws auth.forbidden, auth.foreign-rig or auth.reauthentication-needed */
  private async authorise(
    request: Authenticated,
    access: readonly Access[],
    context: ExecutionContext,
    session: LiveSession,
  ): Promise<void> {
    if (!isAllowed(access, session.user.roles)) throw new DomainError('auth.forbidden', refusal(access));
    request.rigScope = rigScopeOf(session.user, access);
    if (this.stated<boolean>(EMERGENCY, context) !== true) await this.refuseForeignRigs(request);
    if (this.stated<boolean>(REAUTHENTICATION, context) === true && !session.isElevated) {
      throw new DomainError('auth.reauthentication-needed');
    }
  }

  private stated<T>(key: string, context: ExecutionContext): T | undefined {
    return this.reflector.getAllAndOverride<T | undefined>(key, [context.getHandler(), context.getClass()]);
  }

  private async sessionOf(request: Request, isEmergency: boolean): Promise<LiveSession> {
    const session = await this.sessions.ofCookieHeader(request.headers.cookie);
    if (session === null) throw new DomainError('auth.required');
    if (session.isIdle && !isEmergency) {
      throw new DomainError('auth.required', 'Nobody has acted here for a while: sign in again.');
    }
    // A stop pressed at an unattended page wakes no session up.
    if (!session.isIdle && request.headers[unattendedHeader] === undefined) {
      this.sessions.touch(session.user.sessionId);
    }
    return session;
  }

  /** @throws auth.foreign-rig */
  private async refuseForeignRigs(request: Authenticated): Promise<void> {
    const { rigScope } = request;
    if (rigScope === null) return;
    const about = await this.rigs.find(request);
    if (about === null) {
      this.logger.error(`The rig of ${request.method} ${request.path} cannot be told: refused.`);
      throw new DomainError('auth.foreign-rig');
    }
    if (about.some((rigId) => !isInScope(rigScope, rigId))) throw new DomainError('auth.foreign-rig');
  }
}

/** For the log: the path is percent-encoded, so that it cannot break a line. */
function refused({ user, method, path, ip }: Authenticated, { code }: DomainError): string {
  return `${user.account} from ${ip ?? 'nowhere'} was refused ${method} ${path}: ${code}`;
}

function isAllowed(access: readonly Access[], roles: readonly Role[]): boolean {
  return access.includes('signed-in') || roles.some((role) => access.includes(role));
}

function refusal(access: readonly Access[]): string {
  return `Your role may not do this: it needs ${access.join(' or ')}.`;
}
