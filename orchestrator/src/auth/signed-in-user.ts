import { createParamDecorator, type ExecutionContext } from '@nestjs/common';
import { DomainError, type Role } from '@cresthold/shared';
import type { Request } from 'express';
import type { RigLimit } from '../users/dto/user.dto.js';

/** Who sent a request. */
export interface SignedInUser {
  account: string;
  title: string;
  roles: Role[];
  /** Roles that reach the named rigs only; the others reach all. */
  rigLimits: RigLimit[];
  /** The session it came with. */
  sessionId: string;
}

/** The person who sent the request, in a controller's method. */
export const CurrentUser = createParamDecorator((_: unknown, context: ExecutionContext): SignedInUser => {
  const { user } = context.switchToHttp().getRequest<Request & { user?: SignedInUser }>();
  if (user === undefined) throw new DomainError('auth.required');
  return user;
});
