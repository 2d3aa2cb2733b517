import type { RigPhase, RigStatus } from '@cresthold/shared';

const phaseTexts: Record<RigPhase, string> = {
  offline: 'The rig is offline.',
  idle: 'The rig is not armed.',
  armed: 'The rig is armed.',
  running: 'A run is going on: stop it first.',
  stopping: 'The rig is stopping: wait until it is at rest.',
  tripped: 'The rig is tripped: the trip must be reset first.',
};

/** Why the rig cannot be armed now, in words; null where it can. */
export function armObstacle(status: RigStatus | null, roleObstacle: string | null): string | null {
  if (roleObstacle !== null) return roleObstacle;
  if (!status) return 'The state of the rig is not known.';
  if (status.isLockedOut) return 'The rig is locked out.';
  if (status.phase !== 'idle') return phaseTexts[status.phase];
  return status.armingObstacles.length > 0 ? 'Clear the points under "Before arming" first.' : null;
}

/** Why the rig cannot be disarmed now; null where it can. */
export function disarmObstacle(status: RigStatus | null, roleObstacle: string | null): string | null {
  if (roleObstacle !== null) return roleObstacle;
  return status?.phase === 'armed' ? null : phaseTexts[status?.phase ?? 'offline'];
}

/** Why an actuator cannot be moved by hand now; null where it can. */
export function moveObstacle(status: RigStatus | null, roleObstacle: string | null): string | null {
  if (roleObstacle !== null) return roleObstacle;
  if (!status) return 'The state of the rig is not known.';
  return status.phase === 'armed' ? null : phaseTexts[status.phase];
}
