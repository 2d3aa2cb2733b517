import { motionOf } from '../envelopes/rig-moves.js';
import type { HeldActuator } from './actuator-bank.js';
import { actuatorsOf, type EngineState, tripIfInMotion } from './engine-state.js';
import type { ScanInput } from './scan-engine.types.js';

/** Two times closer than this are the same, s: sums of periods are not exact. */
const sameTimeS = 1e-9;

/** Watches that do not come from conditions: lateness of the scan, the server, and the read-backs. */
export function watch(engine: EngineState, input: ScanInput): void {
  watchOverruns(engine, input);
  watchServer(engine, input);
  watchReadBacks(engine, input);
}

/** Whether the read-back is outside its tolerance now; one that cannot be read counts as outside. */
export function isReadBackOutside(engine: EngineState, actuator: HeldActuator): boolean {
  const error = Math.abs(engine.readings.goodValue(actuator.readingIndex) - actuator.guarded.applied);
  return !(error <= actuator.limit.readBackTolerance);
}

function watchOverruns(engine: EngineState, { latenessS, tS, atMs }: ScanInput): void {
  const isOverrun = latenessS > engine.periodS;
  engine.consecutiveOverruns = isOverrun ? engine.consecutiveOverruns + 1 : 0;
  if (isOverrun) engine.log.noteOverrun(latenessS, engine.consecutiveOverruns);
  engine.log.sayOverruns(tS, false);
  if (!isOverrun) return;
  const limit = engine.fitted?.inForce.content.overrunLimit ?? Infinity;
  if (engine.consecutiveOverruns < limit) return;
  const message = `${engine.consecutiveOverruns} scans in a row came later than one period.`;
  tripIfInMotion(engine, 'overrun', message, atMs);
}

function watchServer(engine: EngineState, { serverSilentS, atMs }: ScanInput): void {
  engine.serverSilentS = serverSilentS;
  const limitS = engine.fitted?.inForce.content.serverSilenceS ?? Infinity;
  if (serverSilentS <= limitS) return;
  tripIfInMotion(engine, 'server-silent', `The server has been silent for over ${limitS} s.`, atMs);
}

/** Only what this engine writes can be compared with what is read back. */
function watchReadBacks(engine: EngineState, { tS, atMs }: ScanInput): void {
  if (motionOf[engine.rigState.phase] === 'none') return;
  for (const actuator of actuatorsOf(engine)) {
    const isReleased = actuator.isStopped && actuator.limit.stopCategory !== 2;
    if (!actuator.isTaken || isReleased || !isReadBackOutside(engine, actuator)) {
      actuator.mismatchSinceS = NaN;
      continue;
    }
    if (Number.isNaN(actuator.mismatchSinceS)) actuator.mismatchSinceS = tS;
    const { channel, limit } = actuator;
    if (tS - actuator.mismatchSinceS <= limit.readBackWithinS + sameTimeS) continue;
    const message = `Actuator "${channel}" did not follow: its read-back was outside ±${limit.readBackTolerance} of what was written for over ${limit.readBackWithinS} s.`;
    tripIfInMotion(engine, `read-back:${channel}`, message, atMs);
  }
}
