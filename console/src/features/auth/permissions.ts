import type { Role } from '@cresthold/shared';

/** Who may do what, as docs/api.md states it; the server decides, this only says so beforehand. */
export const permissions = {
  'rig.arm': ['test-engineer', 'technician'],
  'rig.move': ['test-engineer', 'technician'],
  'rig.reset': ['safety-officer'],
  'rig.lock-out': ['test-engineer', 'technician', 'safety-officer', 'administrator'],
  'interlock.bypass': ['safety-officer'],
  'interlock.acknowledge': ['technician', 'test-engineer', 'safety-officer'],
  'proof-test.do': ['technician', 'test-engineer', 'safety-officer'],
  'rig.inject-fault': ['test-engineer'],
  'rig.wire': ['test-engineer', 'administrator'],
  'rig.test-channel': ['test-engineer', 'technician'],
  'calibration.edit': ['test-engineer', 'safety-officer'],
  'envelope.draft': ['test-engineer', 'safety-officer'],
  'envelope.decide': ['safety-officer'],
  'objective.edit': ['test-engineer'],
  'experiment.edit': ['test-engineer'],
  'run.start': ['test-engineer', 'technician'],
  'run.steer': ['test-engineer', 'technician'],
  'people.manage': ['administrator'],
} as const satisfies Record<string, readonly Role[]>;

export type Permission = keyof typeof permissions;

export const roleTitles: Record<Role, string> = {
  administrator: 'administrator',
  'safety-officer': 'safety officer',
  'test-engineer': 'test engineer',
  technician: 'technician',
  reader: 'reader',
};

/**
 * Why these roles may not do it, in words; null where they may.
 *
 * @example
 * obstacleFor('rig.reset', ['technician']) // 'Needs the role safety officer.'
 */
export function obstacleFor(permission: Permission, roles: readonly Role[]): string | null {
  const allowed: readonly Role[] = permissions[permission];
  if (allowed.some((role) => roles.includes(role))) return null;
  return `Needs the role ${allowed.map((role) => roleTitles[role]).join(' or ')}.`;
}
