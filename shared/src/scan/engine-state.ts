import {
  initialRigState,
  isRefusal,
  type RigEvent,
  type RigState,
  transition,
  type TripNote,
} from '../envelopes/rig-state-machine.js';
import { motionOf } from '../envelopes/rig-moves.js';
import { DomainError, type FieldFault } from '../errors/domain-error.js';
import type { Rig } from '../rigs/rig.schema.js';
import { type HeldActuator, releaseAll } from './actuator-bank.js';
import { DerivedChannels } from './derived-channels.js';
import { EventLog } from './event-log.js';
import { fitEnvelope, type FittedEnvelope } from './fitted-envelope.js';
import { Readings } from './readings.js';
import { SensorCalibrations } from './sensor-calibrations.js';
import type { RunEnd, RunKeeper } from './run-keeper.js';
import type { ScanEngineConfiguration, ScanOutput, ValueGrid } from './scan-engine.types.js';
import { beginStopAction } from './stop-action.js';
import { isoTime } from './wall-time.js';
import { WireWatch } from './wire-watch.js';

/** All that a scan engine remembers from scan to scan. */
export interface EngineState {
  readonly rig: Rig;
  readonly periodS: number;
  readonly grids: ReadonlyMap<string, ValueGrid>;
  readonly readings: Readings;
  readonly calibrations: SensorCalibrations;
  readonly derived: DerivedChannels;
  readonly wires: WireWatch;
  readonly isConnectionLost: (connection: string) => boolean;
  readonly log: EventLog;
  readonly output: ScanOutput;
  rigState: RigState;
  fitted: FittedEnvelope | null;
  run: RunKeeper | null;
  /** Best-known point of the run that ended last. */
  lastBestPoint: Record<string, number>;
  /** Armed since the scan before: its first scan takes the actuators over once more. */
  isJustArmed: boolean;
  consecutiveOverruns: number;
  serverSilentS: number;
  /** Time of the last scan, s; 0 before the first. */
  lastScanS: number;
  /** Wall time of the last scan, ms since 1970; for what people are told only. */
  lastScanAtMs: number;
  isStatusChanged: boolean;
}

/** @throws expression.invalid, channel.not-found where rig or envelope do not fit together */
export function createEngineState(configuration: ScanEngineConfiguration): EngineState {
  const { rig, envelope, grids, trip, isLockedOut, calibrations = [] } = configuration;
  const readings = Readings.of(rig);
  const output: ScanOutput = {
    writes: [],
    applied: new Float64Array(readings.channelIds.length).fill(NaN),
    row: null,
    runTS: null,
    events: [],
    runEnded: null,
    isStatusChanged: true,
  };
  const wires = new WireWatch();
  return {
    rig,
    periodS: rig.periodMs / 1000,
    grids,
    readings,
    calibrations: new SensorCalibrations(calibrations, rig, readings),
    derived: new DerivedChannels(rig, readings),
    wires,
    isConnectionLost: (connection) => wires.isLost(connection),
    log: new EventLog(output.events),
    output,
    rigState: initialRigState(trip, isLockedOut),
    fitted: envelope ? fitEnvelope(envelope, rig, grids, readings) : null,
    run: null,
    lastBestPoint: {},
    isJustArmed: false,
    consecutiveOverruns: 0,
    serverSilentS: 0,
    lastScanS: 0,
    lastScanAtMs: 0,
    isStatusChanged: true,
  };
}

const noActuators: readonly HeldActuator[] = [];

export function actuatorsOf(engine: EngineState): readonly HeldActuator[] {
  return engine.fitted?.actuators ?? noActuators;
}

/**
 * Takes an event through the rig state machine.
 *
 * @throws the refusal of the state machine; nothing has changed then
 */
export function applyRigEvent(engine: EngineState, event: RigEvent, details: FieldFault[] = []): void {
  const outcome = transition(engine.rigState, event);
  if (isRefusal(outcome)) throw new DomainError(outcome.refusal, undefined, details);
  engine.rigState = outcome;
  engine.isStatusChanged = true;
}

/** Asks only: would the event be refused? */
export function requireRigEvent(engine: EngineState, event: RigEvent): void {
  const outcome = transition(engine.rigState, event);
  if (isRefusal(outcome)) throw new DomainError(outcome.refusal);
}

/** Latches a trip in any phase; while one is latched the cause is listed behind it. */
export function latchTrip(
  engine: EngineState,
  type: 'trip' | 'emergency-stop' | 'wire-lost',
  note: TripNote,
): void {
  const wasTripped = engine.rigState.phase === 'tripped';
  applyRigEvent(engine, { type, note });
  if (wasTripped || engine.rigState.phase !== 'tripped') return;
  beginStopAction(actuatorsOf(engine));
  if (engine.run) endRunBy(engine.run, { status: 'tripped', verdict: 'inconclusive', reason: note.message });
  engine.log.add({ type: 'rig.tripped', cause: note.cause, message: note.message });
}

/** A cause found by the scan: it trips a rig that may move, and is listed behind a latched trip. */
export function tripIfInMotion(engine: EngineState, cause: string, message: string, atMs: number): void {
  const { phase, trip } = engine.rigState;
  if (motionOf[phase] === 'none') return;
  if (trip && (trip.cause === cause || trip.later.some((later) => later.cause === cause))) return;
  latchTrip(engine, 'trip', { cause, message, at: isoTime(atMs), by: null });
}

/** Begins an ordered stop; `end` says how an open run ends once the rig is at rest. */
export function orderStop(engine: EngineState, type: 'stop' | 'disarm' | 'lock-out', end: RunEnd): void {
  const before = engine.rigState.phase;
  applyRigEvent(engine, { type });
  if (before === 'stopping' || engine.rigState.phase !== 'stopping') return;
  beginStopAction(actuatorsOf(engine));
  if (!engine.run) return;
  endRunBy(engine.run, end);
  engine.log.add({ type: 'run.stopping', reason: end.reason });
}

/** The rig is no longer held: after rest was reached, or after a reset. */
export function letGo(engine: EngineState): void {
  releaseAll(actuatorsOf(engine));
}

function endRunBy(run: RunKeeper, end: RunEnd): void {
  run.end = end;
  run.isPaused = false;
  run.activeSteps = [];
}
