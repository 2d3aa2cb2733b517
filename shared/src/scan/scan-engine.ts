import {
  actuatorsOf,
  createEngineState,
  type EngineState,
  latchTrip,
  requireRigEvent,
} from './engine-state.js';
import { DomainError } from '../errors/domain-error.js';
import { acknowledgeInterlock, bypassInterlock, endBypass, forceInterlock } from './interlock-commands.js';
import { pauseRun, resumeRun } from './pause.js';
import * as commands from './scan-commands.js';
import { runScan } from './scan-cycle.js';
import type { ScanEngine, ScanEngineConfiguration } from './scan-engine.types.js';
import { statusOf } from './scan-status.js';
import { experimentParts, type ExperimentParts, startRun } from './start-run.js';
import { isStopComplete } from './stop-action.js';
import { isoTime } from './wall-time.js';

/**
 * Makes the engine of one rig. What it decides where the contract leaves it open:
 * - A run whose experiment finished stays open through `stopping` and ends `finished`, with the verdict of
 *   its checks, once every actuator is read back at rest; so its record shows how the rig came to rest. An
 *   ordered stop likewise ends `stopped`. After a trip the run stays open, always inconclusive, until the stop
 *   action is complete where the wire reaches, or should long have been; then it ends `tripped`.
 * - An actuator is at rest only when its read-back says so; until then its rest value is written again.
 * - A stop action that was interrupted by a lost wire goes on from the read-back when the wire is back.
 * - A reset needs every cause gone, the later ones too, the stop action complete and the run ended.
 * - In `idle` and `offline` nothing but the heartbeat is written, and only the emergency stop and `trip`
 *   latch a trip: an interlock that is not clear there forbids arming.
 *
 * @param parts what checks and runs experiments; tests pass scripted ones
 * @throws expression.invalid, channel.not-found where rig and envelope do not fit together
 */
export function createScanEngine(
  configuration: ScanEngineConfiguration,
  parts: ExperimentParts = experimentParts,
): ScanEngine {
  const engine = createEngineState(configuration);
  return {
    readings: engine.readings,
    scan: (input) => runScan(engine, input),
    setEnvelope: (envelope) => commands.setEnvelope(engine, envelope),
    setLockout: (isLockedOut) => commands.setLockout(engine, isLockedOut),
    arm: () => commands.arm(engine),
    disarm: (by) => commands.disarm(engine, by),
    move: (channel, value, by, hold = null) => commands.move(engine, { channel, value, by, hold }),
    releaseMove: (channel, holdId) => commands.releaseMove(engine, channel, holdId),
    startRun: (order) => startRun(engine, order, parts),
    pause: (_by, reason) => pause(engine, reason),
    resume: (by) => resumeRun(engine, by),
    stop: (_by, reason) => commands.stop(engine, reason),
    emergencyStop: (by, reason, atMs) => {
      const note = {
        cause: 'emergency-stop',
        message: reason.trim() || `Emergency stop by ${by}.`,
        at: isoTime(atMs),
        by,
      };
      latchTrip(engine, 'emergency-stop', note);
    },
    trip: (cause, message, atMs) =>
      latchTrip(engine, 'trip', { cause, message, at: isoTime(atMs), by: null }),
    reset: (_by, reason) => commands.reset(engine, reason),
    bypassInterlock: (order) => bypassInterlock(engine, order),
    endBypass: (interlock, by) => endBypass(engine, interlock, by),
    acknowledgeInterlock: (interlock, by) => acknowledgeInterlock(engine, interlock, by),
    forceInterlock: (order) => forceInterlock(engine, order),
    isAtRest: () => isAtRest(engine),
    status: () => statusOf(engine),
  };
}

function pause(engine: EngineState, reason: string): void {
  requireRigEvent(engine, { type: 'pause' });
  if (engine.run?.isPaused) throw new DomainError('run.not-running', 'The run is paused already.');
  pauseRun(engine, reason);
}

function isAtRest(engine: EngineState): boolean {
  if (engine.run) return false;
  const { phase } = engine.rigState;
  if (phase === 'idle' || phase === 'offline') return true;
  return phase === 'tripped' && isStopComplete(actuatorsOf(engine));
}
