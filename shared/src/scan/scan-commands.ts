import type { EnvelopeInForce } from '../envelopes/envelope.schema.js';
import { isInsideRange } from '../envelopes/guard.js';
import { DomainError } from '../errors/domain-error.js';
import type { RunEnd } from './run-keeper.js';
import { type HeldActuator, takeOverFromReadBack } from './actuator-bank.js';
import { checkArming } from './arming-checklist.js';
import {
  actuatorsOf,
  applyRigEvent,
  type EngineState,
  letGo,
  orderStop,
  requireRigEvent,
} from './engine-state.js';
import { grip, release, requireNotHeldByAnother } from './held-move.js';
import type { MoveAnswer, MoveHold } from './held-move.schema.js';
import { fitEnvelope } from './fitted-envelope.js';
import { presentCauses } from './present-causes.js';
import { beginStopAction } from './stop-action.js';

/** A manual move, and who holds it; without a hold it goes on by itself. */
export interface MoveOrder {
  channel: string;
  value: number;
  by: string;
  hold: MoveHold | null;
}

/**
 * Puts an envelope in force. While a trip is latched the stop action goes on with the new limits. A run is
 * recorded to its end under the envelope in which it began.
 *
 * @throws rig.busy while armed, running or stopping, and while a run is open
 * @throws channel.not-found, expression.invalid where it does not fit the rig
 */
export function setEnvelope(engine: EngineState, envelope: EnvelopeInForce): void {
  requireRigEvent(engine, { type: 'set-envelope' });
  if (engine.run) {
    throw new DomainError('rig.busy', 'The run records its stop action: wait until it has ended.');
  }
  const fitted = fitEnvelope(envelope, engine.rig, engine.grids, engine.readings);
  const before = actuatorsOf(engine);
  for (const actuator of fitted.actuators) {
    const known = before.find(({ channel }) => channel === actuator.channel);
    if (!known) continue;
    actuator.guarded.applied = known.guarded.applied;
    actuator.isTaken = known.isTaken;
    actuator.pressesOver.push(...known.pressesOver);
  }
  beginStopAction(fitted.actuators);
  engine.fitted = fitted;
  applyRigEvent(engine, { type: 'set-envelope' });
}

/** A lockout forbids arming; a rig that is armed or running is stopped in order. */
export function setLockout(engine: EngineState, isLockedOut: boolean): void {
  if (isLockedOut) orderStop(engine, 'lock-out', stopped('The rig was locked out.'));
  else applyRigEvent(engine, { type: 'lift-lockout' });
}

/** @throws rig.cannot-arm listing what forbids it; rig.tripped, rig.offline, rig.busy, rig.illegal-move */
export function arm(engine: EngineState): void {
  const { conditions, obstacles } = checkArming(engine);
  applyRigEvent(engine, { type: 'arm', ...conditions }, obstacles);
  for (const actuator of actuatorsOf(engine)) {
    takeOverFromReadBack(actuator, engine.readings);
    actuator.isStopped = false;
  }
  engine.isJustArmed = true;
}

/** @throws rig.not-armed, rig.busy, rig.tripped */
export function disarm(engine: EngineState, by: string): void {
  orderStop(engine, 'disarm', stopped(`Disarmed by ${by}.`));
}

/**
 * @throws rig.not-armed, rig.busy, rig.offline, rig.tripped by the rig's phase
 * @throws channel.not-found, channel.no-limit, request.invalid by the channel and value
 * @throws move.hold-ended, move.held-by-another by who holds the actuator
 */
export function move(engine: EngineState, order: MoveOrder): MoveAnswer {
  requireRigEvent(engine, { type: 'manual-move' });
  const { value, hold, by } = order;
  const actuator = limitedActuator(engine, order.channel);
  const { limit } = actuator;
  if (!isInsideRange(limit, value)) {
    const message = `Give a value from ${limit.min} to ${limit.max}: these are the approved limits.`;
    throw new DomainError('request.invalid', undefined, [{ field: 'value', message }]);
  }
  if (hold === null) requireNotHeldByAnother(actuator, null);
  const answer = hold === null ? { isRenewal: false } : grip(actuator, hold, by, engine.lastScanS);
  if (!answer.isRenewal) engine.isStatusChanged = true;
  actuator.target = value;
  actuator.heldTowards = value;
  return answer;
}

/**
 * Ends a held move at once; accepted in every phase, because a press is over when it is over.
 *
 * @throws channel.not-found, channel.no-limit
 */
export function releaseMove(engine: EngineState, channel: string, holdId: string): void {
  release(limitedActuator(engine, channel), holdId);
  engine.isStatusChanged = true;
}

function limitedActuator(engine: EngineState, channel: string): HeldActuator {
  const kind = engine.rig.channels.find(({ id }) => id === channel)?.kind;
  if (kind !== 'actuator')
    throw new DomainError('channel.not-found', `The rig has no actuator "${channel}".`);
  const actuator = actuatorsOf(engine).find((held) => held.channel === channel);
  if (!actuator) throw new DomainError('channel.no-limit');
  return actuator;
}

/** @throws run.not-running, rig.tripped */
export function stop(engine: EngineState, reason: string): void {
  orderStop(engine, 'stop', stopped(reason));
}

/**
 * @throws rig.not-tripped, rig.cause-present naming what is still there, request.invalid without a reason
 */
export function reset(engine: EngineState, reason: string): void {
  const causes = presentCauses(engine);
  const hasReason = reason.trim() !== '';
  const details = hasReason ? causes : [{ field: 'reason', message: 'Say why the trip may be reset.' }];
  applyRigEvent(engine, { type: 'reset', isCausePresent: causes.length > 0, hasReason }, details);
  letGo(engine);
}

function stopped(reason: string): RunEnd {
  return { status: 'stopped', verdict: 'inconclusive', reason };
}
