import type { Interlock } from '../envelopes/envelope.schema.js';
import { Quality } from '../rigs/quality.js';
import { motionOf } from '../envelopes/rig-moves.js';
import { noteReachability } from './actuator-bank.js';
import { bestPoint } from './best-point.js';
import { decide } from './decide.js';
import {
  actuatorsOf,
  applyRigEvent,
  type EngineState,
  latchTrip,
  orderStop,
  tripIfInMotion,
} from './engine-state.js';
import { pauseRun } from './pause.js';
import type { FittedEnvelope } from './fitted-envelope.js';
import type { RunKeeper } from './run-keeper.js';
import type { ScanInput, ScanOutput } from './scan-engine.types.js';
import { isStopCompleteWhereReachable, stopTimeAtMostS } from './stop-action.js';
import { isoTime } from './wall-time.js';
import { watch } from './watchdogs.js';

/**
 * One scan: calibrated and derived channels, then judged before decided, and guarded after; then what is to be
 * written and recorded.
 */
export function runScan(engine: EngineState, input: ScanInput): ScanOutput {
  const { output, run, log } = engine;
  engine.lastScanS = input.tS;
  engine.lastScanAtMs = input.atMs;
  output.writes.length = 0;
  output.row = null;
  output.runEnded = null;
  output.runTS = run ? run.runTS(input.tS) : null;
  log.beginScan(output.runTS, input.atMs);
  lookAtWires(engine, input);
  engine.calibrations.apply();
  engine.derived.fill();
  judge(engine, input);
  watch(engine, input);
  run?.evaluateObjective();
  decide(engine, input);
  log.sayInterventions(actuatorsOf(engine), input.tS, false);
  collectWrites(engine, input.tS);
  if (run) output.row = run.fillRow();
  closeRun(engine, input.tS);
  log.endScan();
  output.isStatusChanged = engine.isStatusChanged;
  engine.isStatusChanged = false;
  return output;
}

function lookAtWires(engine: EngineState, input: ScanInput): void {
  const { wires, log } = engine;
  wires.update(input.lostConnections);
  for (const connection of wires.restored) {
    log.add({ type: 'connection.restored', connection });
    engine.isStatusChanged = true;
  }
  for (const { connection, code, message } of wires.newlyLost) {
    log.add({ type: 'connection.lost', connection, code, message });
    const note = { cause: `connection:${connection}`, message, at: isoTime(input.atMs), by: null };
    latchTrip(engine, 'wire-lost', note);
  }
  if (wires.isAllUp() && !engine.rigState.isWireUp) applyRigEvent(engine, { type: 'wire-restored' });
  if (!wires.isAllUp()) blankLostChannels(engine);
  noteReachability(actuatorsOf(engine), engine.isConnectionLost, engine.grids, input.tS);
}

/** Whatever the caller left in the readings: nothing can be known through a connection that is down. */
function blankLostChannels(engine: EngineState): void {
  const { channels } = engine.rig;
  for (let i = 0; i < channels.length; i++) {
    const channel = channels[i];
    if (channel && channel.kind !== 'derived' && engine.wires.isLost(channel.connection)) {
      engine.readings.set(i, NaN, Quality.missing);
    }
  }
}

function judge(engine: EngineState, input: ScanInput): void {
  const { fitted, log } = engine;
  if (!fitted) return;
  const { interlocks, staleness } = fitted;
  if (fitted.emergencyStops.isAnyNotReleased) watchEmergencyStops(engine, fitted, input.atMs);
  interlocks.judge(input.tS);
  staleness.judge(engine.readings, input.tS);
  if (interlocks.hasChanged) engine.isStatusChanged = true;
  for (const { id } of interlocks.cleared) log.add({ type: 'interlock.cleared', interlock: id });
  for (const { id } of interlocks.bypassEnded)
    log.add({ type: 'interlock.bypass-ended', interlock: id, by: null });
  for (const interlock of interlocks.acted) {
    const { id, action, message } = interlock;
    log.add({ type: 'interlock.acted', interlock: id, action, message });
    actOn(engine, interlock, input.atMs);
  }
  holdRun(engine);
  staleness.forEachStale(({ channel, afterS }) => {
    const message = `Sensor "${channel}" gave no good value for over ${afterS} s.`;
    tripIfInMotion(engine, `stale:${channel}`, message, input.atMs);
  });
}

/**
 * A hard-wired emergency stop stops the software too, in every phase. One whose reading is not known counts as
 * pressed wherever there may be motion; at rest it only forbids arming.
 */
function watchEmergencyStops(engine: EngineState, fitted: FittedEnvelope, atMs: number): void {
  fitted.emergencyStops.forEachNotReleased(({ channel, title }, isKnown) => {
    const cause = `emergency-stop-input:${channel}`;
    const { phase, trip } = engine.rigState;
    if (!isKnown && motionOf[phase] === 'none') return;
    if (trip && (trip.cause === cause || trip.later.some((later) => later.cause === cause))) return;
    const message = isKnown ? `${title} is pressed.` : `${title} cannot be read and counts as pressed.`;
    latchTrip(engine, 'emergency-stop', { cause, message, at: isoTime(atMs), by: null });
  });
}

/** An interlock that pauses holds every run as long as it is not clear, also one that began meanwhile. */
function holdRun(engine: EngineState): void {
  if (engine.rigState.phase !== 'running' || !engine.run || engine.run.isPaused) return;
  const interlock = engine.fitted?.interlocks.firstActed('pause');
  if (interlock) pauseRun(engine, interlock.message);
}

/** Warn says so and no more; pausing is {@link holdRun}'s; a stop means something only where there is motion. */
function actOn(engine: EngineState, { id, action, message }: Interlock, atMs: number): void {
  const { phase } = engine.rigState;
  if (action === 'trip') tripIfInMotion(engine, `interlock:${id}`, message, atMs);
  if (action === 'stop' && (phase === 'armed' || phase === 'running')) {
    orderStop(engine, 'stop', { status: 'stopped', verdict: 'inconclusive', reason: message });
  }
}

function collectWrites(engine: EngineState, tS: number): void {
  const { writes, applied } = engine.output;
  applied.fill(NaN);
  for (const actuator of actuatorsOf(engine)) {
    if (!actuator.isWritten) continue;
    actuator.write.value = actuator.guarded.applied;
    applied[actuator.readingIndex] = actuator.guarded.applied;
    writes.push(actuator.write);
  }
  const heartbeat = engine.fitted?.heartbeat;
  if (heartbeat && !engine.wires.isLost(heartbeat.connection) && heartbeat.beat(tS)) {
    writes.push(heartbeat.write);
  }
}

/** A run ends when the rig has come to rest; after a trip, when it has as far as it can be reached. */
function closeRun(engine: EngineState, tS: number): void {
  const { run, rigState, log } = engine;
  if (!run?.end || rigState.phase === 'stopping' || rigState.phase === 'running') return;
  if (rigState.phase === 'tripped' && isStopAwaited(engine, run, tS)) return;
  log.sayInterventions(actuatorsOf(engine), tS, true);
  log.sayOverruns(tS, true);
  log.add({ type: 'run.ended', ...run.end });
  engine.output.runEnded = { ...run.end, results: run.results() };
  engine.lastBestPoint = bestPoint(run.order.experiment.graph, run.sequencer);
  engine.run = null;
  engine.isStatusChanged = true;
}

/**
 * Whether the record of a tripped run still waits for its stop action. An actuator whose connection is down
 * is not waited for, and one that does not come to rest only for as long as it should have needed.
 */
function isStopAwaited(engine: EngineState, run: RunKeeper, tS: number): boolean {
  const actuators = actuatorsOf(engine);
  if (Number.isNaN(run.stopAwaitedUntilS)) run.stopAwaitedUntilS = tS + stopTimeAtMostS(actuators);
  return !isStopCompleteWhereReachable(actuators) && tS < run.stopAwaitedUntilS;
}
