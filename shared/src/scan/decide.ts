import { freshSlew, guardRequest, isInsideRange, slewAllowance } from '../envelopes/guard.js';
import type { SequencerOutput } from '../experiments/sequencer.types.js';
import { type HeldActuator, moveTowards, takeOverFromReadBack } from './actuator-bank.js';
import {
  actuatorsOf,
  applyRigEvent,
  type EngineState,
  letGo,
  orderStop,
  tripIfInMotion,
} from './engine-state.js';
import { endWhereNotRenewed } from './held-move.js';
import type { RunKeeper } from './run-keeper.js';
import type { ScanInput } from './scan-engine.types.js';
import { isStopComplete, noteStopped, stepStopAction } from './stop-action.js';

/** Decides what every actuator is asked for in this scan, and takes it through the guard. */
export function decide(engine: EngineState, input: ScanInput): void {
  const actuators = actuatorsOf(engine);
  if (engine.isJustArmed) takeOverAfresh(engine, actuators);
  for (const actuator of actuators) {
    actuator.isWritten = false;
    actuator.requested = NaN;
    actuator.requestedBase = actuator.base;
    actuator.requestedDither = 0;
    actuator.isHolding = true;
  }
  if (engine.rigState.phase === 'running') ask(engine, input);
  if (engine.rigState.phase === 'armed') followTargets(engine, actuators, input);
  switch (engine.rigState.phase) {
    case 'armed':
    case 'running':
      guardAll(engine, input);
      break;
    case 'stopping':
    case 'tripped':
      stopOn(engine, input);
      break;
    case 'idle':
    case 'offline':
      break;
  }
}

/** The first write after arming starts from what is read back now, not from what was when arming was asked. */
function takeOverAfresh(engine: EngineState, actuators: readonly HeldActuator[]): void {
  engine.isJustArmed = false;
  for (const actuator of actuators) {
    const { target } = actuator;
    if (actuator.isReachable && takeOverFromReadBack(actuator, engine.readings)) actuator.target = target;
  }
}

/** Asks the experiment what it wants. Whatever goes wrong in it ends in the stop action of this scan. */
function ask(engine: EngineState, input: ScanInput): void {
  const { run } = engine;
  if (!run || run.isPaused) return;
  const wanted = stepSafely(engine, run, input);
  if (!wanted) return;
  noteActiveSteps(engine, run, wanted.activeSteps);
  for (const event of wanted.events) engine.log.add(event);
  if (wanted.end) {
    orderStop(engine, 'stop', { status: 'finished', ...wanted.end });
    return;
  }
  for (const { channel, base, dither } of wanted.requests) {
    const actuator = findActuator(engine, channel);
    if (!actuator) {
      const message = `The experiment asked for "${channel}", which has no approved limit.`;
      tripIfInMotion(engine, `no-limit:${channel}`, message, input.atMs);
      return;
    }
    actuator.requestedBase = base;
    actuator.requestedDither = dither;
    actuator.isHolding = false;
  }
}

function noteHoldTimedOut(engine: EngineState, { channel }: HeldActuator): void {
  engine.isStatusChanged = true;
  engine.log.add({ type: 'move.hold-timed-out', channel });
}

function stepSafely(engine: EngineState, run: RunKeeper, input: ScanInput): SequencerOutput | null {
  try {
    return run.step(input.dtS);
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error);
    tripIfInMotion(
      engine,
      'fault:sequencer',
      `The experiment failed by a fault of its own: ${why}`,
      input.atMs,
    );
    return null;
  }
}

/**
 * Manual moves: from where the actuator is to the target at the slew limit. One that must be held and was not
 * renewed in time goes no further.
 */
function followTargets(
  engine: EngineState,
  actuators: readonly HeldActuator[],
  { tS, dtS }: ScanInput,
): void {
  for (const actuator of actuators) {
    if (endWhereNotRenewed(actuator, tS)) noteHoldTimedOut(engine, actuator);
    if (actuator.base === actuator.target) actuator.target = NaN;
    if (Number.isNaN(actuator.target)) continue;
    const { guarded, target } = actuator;
    actuator.isHolding = false;
    actuator.requestedBase = moveTowards(guarded.applied, target, slewAllowance(guarded, dtS));
  }
}

/**
 * The held base follows what was asked for at no more than the slew limit, so that a pause or the
 * end of a step finds the actuator about where its base is.
 */
function guardAll(engine: EngineState, input: ScanInput): void {
  for (const actuator of actuatorsOf(engine)) {
    if (actuator.isHolding) actuator.requestedBase = heldWithinReach(actuator, input.dtS);
    const { guarded, limit, requestedBase, requestedDither } = actuator;
    actuator.requested = requestedBase + requestedDither;
    if (!guardRequest(guarded, requestedBase, requestedDither, input.dtS)) {
      const message = `Actuator "${actuator.channel}" was asked for a value that is no number.`;
      tripIfInMotion(engine, `non-finite:${actuator.channel}`, message, input.atMs);
      continue;
    }
    actuator.isWritten = true;
    if (actuator.isHolding) continue;
    const inRange = Math.min(Math.max(requestedBase, limit.min), limit.max);
    actuator.base = moveTowards(actuator.base, inRange, freshSlew(guarded, input.dtS));
  }
}

/**
 * The held base, or what leads there: where a step or a dither ended away from its base, the way back is walked
 * at the slew limit and is no matter for the guard. From outside the range the guard brings an actuator in.
 */
function heldWithinReach({ base, guarded, limit }: HeldActuator, dtS: number): number {
  const { applied, grid } = guarded;
  if (!isInsideRange(limit, applied)) return base;
  return moveTowards(applied, base, freshSlew(guarded, dtS) + grid.step / 2);
}

function stopOn(engine: EngineState, input: ScanInput): void {
  const actuators = actuatorsOf(engine);
  noteStopped(actuators, engine.readings, input.tS);
  if (engine.rigState.phase === 'stopping' && isStopComplete(actuators)) {
    applyRigEvent(engine, { type: 'came-to-rest' });
    letGo(engine);
    return;
  }
  stepStopAction(actuators, input.tS, input.dtS);
}

function noteActiveSteps(engine: EngineState, run: RunKeeper, activeSteps: readonly string[]): void {
  const before = run.activeSteps;
  const isSame = before.length === activeSteps.length && before.every((id, i) => id === activeSteps[i]);
  if (isSame) return;
  run.activeSteps = [...activeSteps];
  engine.isStatusChanged = true;
}

function findActuator(engine: EngineState, channel: string): HeldActuator | null {
  for (const actuator of actuatorsOf(engine)) if (actuator.channel === channel) return actuator;
  return null;
}
