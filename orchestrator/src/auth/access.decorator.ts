import { applyDecorators, SetMetadata } from '@nestjs/common';
import { ApiCookieAuth, ApiExtension, ApiResponse } from '@nestjs/swagger';
import type { Role } from '@cresthold/shared';
import { problemDetailsSchema } from '../problem-details/problem-details.schema.js';

/** Who may use a route: the roles named, anyone signed in, or anyone at all. */
export type Access = Role | 'signed-in' | 'anyone';

export const ACCESS = 'cresthold:access';
export const EMERGENCY = 'cresthold:emergency';
export const REAUTHENTICATION = 'cresthold:reauthentication';

/** Extensions of the OpenAPI document that carry the statements, for scripts and for the test that walks it. */
export const accessExtension = 'x-roles';
export const emergencyExtension = 'x-emergency';
export const reauthenticationExtension = 'x-needs-reauthentication';

/**
 * States who may use a route. Every route states it: a route without is closed to all.
 *
 * @example
 * `@Roles('test-engineer', 'technician')`
 */
export function Roles(...access: [Access, ...Access[]]): MethodDecorator & ClassDecorator {
  const problem = (status: number, description: string) =>
    ApiResponse({ status, description, standardSchema: problemDetailsSchema });
  const common = [
    SetMetadata(ACCESS, access),
    ApiExtension(accessExtension, access),
    ApiResponse({ status: 'default', description: 'Problem details.', standardSchema: problemDetailsSchema }),
  ];
  if (access.includes('anyone')) return applyDecorators(...common);
  return applyDecorators(
    ...common,
    ApiCookieAuth(),
    problem(401, 'Not signed in.'),
    problem(403, 'The role may not, or not on this rig.'),
  );
}

/** A stop: taken on every rig, whatever rigs a role is limited to, and from a session that has become idle. */
export function Emergency(): MethodDecorator {
  return applyDecorators(SetMetadata(EMERGENCY, true), ApiExtension(emergencyExtension, true));
}

/** An act for which the password must have been given again within the last minutes. */
export function NeedsReauthentication(): MethodDecorator {
  return applyDecorators(SetMetadata(REAUTHENTICATION, true), ApiExtension(reauthenticationExtension, true));
}
