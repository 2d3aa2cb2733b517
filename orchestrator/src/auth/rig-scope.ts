import { createParamDecorator, type ExecutionContext } from '@nestjs/common';
import type { Role } from '@cresthold/shared';
import { In, type FindOperator } from 'typeorm';
import type { Access } from './access.decorator.js';
import type { SignedInUser } from './signed-in-user.js';

/** Rigs that somebody reaches: those named, or all where it is null. */
export type RigScope = readonly string[] | null;

type Reach = Pick<SignedInUser, 'roles' | 'rigLimits'>;

/** The rigs that a person reaches through a route open to `access`: those of every role that opens it. */
export function rigScopeOf({ roles, rigLimits }: Reach, access: readonly Access[]): RigScope {
  const counts = (role: Role) => access.includes('signed-in') || access.includes(role);
  const reached = new Set<string>();
  for (const role of roles.filter(counts)) {
    const limit = rigLimits.find((one) => one.role === role);
    if (limit === undefined) return null;
    for (const rigId of limit.rigs) reached.add(rigId);
  }
  return [...reached];
}

export function isInScope(scope: RigScope, rigId: string): boolean {
  return scope === null || scope.includes(rigId);
}

/** Condition on a column that names a rig. */
export type RigCondition = string | FindOperator<string> | undefined;

/** Condition on a column that names a rig; undefined where every row fits. */
export function rigCondition(rigId: string | undefined, scope: RigScope): RigCondition {
  if (rigId !== undefined) return rigId;
  return scope === null ? undefined : In([...scope]);
}

/** In a controller's method: the rigs whose rows a list may show. Set by the guard. */
export const VisibleRigs = createParamDecorator((_: unknown, context: ExecutionContext): RigScope => {
  const { rigScope } = context.switchToHttp().getRequest<{ rigScope?: RigScope }>();
  // A route without a guard shows nothing.
  return rigScope === undefined ? [] : rigScope;
});
