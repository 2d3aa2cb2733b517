import { guardJumpToRest, guardRequest, isAppliedAtRest, slewAllowance } from '../envelopes/guard.js';
import { type HeldActuator, moveTowards, takeOverFromReadBack } from './actuator-bank.js';
import { dropMove } from './held-move.js';
import type { Readings } from './readings.js';

/** Begins the stop action anew for every actuator. */
export function beginStopAction(actuators: readonly HeldActuator[]): void {
  for (const actuator of actuators) {
    actuator.isStopped = false;
    actuator.atRestSinceS = NaN;
    dropMove(actuator);
    actuator.mismatchSinceS = NaN;
  }
}

/**
 * Looks which actuators have come to rest. One is at rest only when its read-back says so: until
 * then its rest value is written again and again.
 */
export function noteStopped(actuators: readonly HeldActuator[], readings: Readings, tS: number): void {
  for (const actuator of actuators) {
    if (actuator.isReachable && !actuator.isTaken) retake(actuator, readings, tS);
    if (!actuator.isReachable || Number.isNaN(actuator.atRestSinceS)) continue;
    const error = Math.abs(readings.goodValue(actuator.readingIndex) - actuator.guarded.rest);
    if (error <= actuator.limit.readBackTolerance) actuator.isStopped = true;
  }
}

/**
 * One scan of the stop action, after {@link noteStopped}: every actuator goes to its rest value by
 * its stop category, lower stop orders first. Category 0 jumps to rest and is then released, 1 ramps
 * at the slew limit and is then released, 2 ramps and stays written.
 *
 * An actuator whose connection is down cannot be stopped and holds no other one up; once it is back it
 * is taken over from its read-back and brought to rest from there.
 *
 * @source stop categories: IEC 60204-1
 * @realtime safe
 */
export function stepStopAction(actuators: readonly HeldActuator[], tS: number, dtS: number): void {
  let order = Infinity;
  for (const actuator of actuators) {
    const isUnderWay = canBeStopped(actuator) && !actuator.isStopped;
    if (isUnderWay) order = Math.min(order, actuator.limit.stopOrder);
  }
  for (const actuator of actuators) {
    const isReleased = actuator.isStopped && actuator.limit.stopCategory !== 2;
    if (isReleased || !canBeStopped(actuator)) continue;
    stepOne(actuator, actuator.limit.stopOrder <= order, tS, dtS);
  }
}

/** Every actuator is at rest, as far as can be known. */
export function isStopComplete(actuators: readonly HeldActuator[]): boolean {
  return actuators.every((actuator) => actuator.isStopped);
}

/** As {@link isStopComplete}, but actuators whose connection is down are left out. */
export function isStopCompleteWhereReachable(actuators: readonly HeldActuator[]): boolean {
  return actuators.every((actuator) => actuator.isStopped || !actuator.isReachable);
}

/** A ramp may take this many times as long as its slew limit says: grids and late scans make it slower. */
const rampTimesAtMost = 2;

/** What a stop action may take beside its ramps and read-backs, s. */
const stopGraceS = 1;

/** @returns longest time in which the stop action should be complete from where the actuators are now, s */
export function stopTimeAtMostS(actuators: readonly HeldActuator[]): number {
  const timeByOrder = new Map<number, number>();
  for (const { guarded, limit } of actuators) {
    const distance = Math.abs(guarded.applied - guarded.rest);
    const way = Number.isNaN(distance) ? limit.max - limit.min : distance;
    const rampS = limit.stopCategory === 0 ? 0 : (rampTimesAtMost * way) / limit.slewPerS;
    const before = timeByOrder.get(limit.stopOrder) ?? 0;
    timeByOrder.set(limit.stopOrder, Math.max(before, rampS + limit.readBackWithinS));
  }
  let totalS = stopGraceS;
  for (const timeS of timeByOrder.values()) totalS += timeS;
  return totalS;
}

/** Category 0 needs no knowledge of where the actuator is: it must only get there. */
function canBeStopped(actuator: HeldActuator): boolean {
  return actuator.isReachable && (actuator.isTaken || actuator.limit.stopCategory === 0);
}

/**
 * From the read-back; where that stays bad for `readBackWithinS`, from the value applied last, because
 * ending at rest is worth more than waiting. Never known at all: it waits.
 */
function retake(actuator: HeldActuator, readings: Readings, tS: number): void {
  if (takeOverFromReadBack(actuator, readings)) return;
  const isPatienceOver = tS - actuator.reachableSinceS > actuator.limit.readBackWithinS;
  if (isPatienceOver && Number.isFinite(actuator.guarded.applied)) actuator.isTaken = true;
}

function stepOne(actuator: HeldActuator, isItsTurn: boolean, tS: number, dtS: number): void {
  const { guarded, limit } = actuator;
  if (!isItsTurn) {
    /** Holds where it is until the lower stop orders are done. */
    if (!actuator.isTaken) return;
    guardRequest(guarded, guarded.applied, 0, dtS);
  } else if (limit.stopCategory === 0) {
    guardJumpToRest(guarded);
    actuator.isTaken = true;
  } else {
    const base = moveTowards(guarded.applied, guarded.rest, slewAllowance(guarded, dtS));
    guardRequest(guarded, base, 0, dtS);
  }
  actuator.base = guarded.applied;
  actuator.requested = guarded.applied;
  actuator.isWritten = true;
  const isAtRest = isItsTurn && isAppliedAtRest(guarded);
  if (!isAtRest) actuator.atRestSinceS = NaN;
  else if (Number.isNaN(actuator.atRestSinceS)) actuator.atRestSinceS = tS;
}
