import type { RigStatus } from '../live/rig-status.schema.js';
import { checkArming } from './arming-checklist.js';
import { bestPoint } from './best-point.js';
import { heldMovesOf } from './held-move.js';
import type { EngineState } from './engine-state.js';

/** All of the rig's status that the engine knows. */
export function statusOf(engine: EngineState): Omit<RigStatus, 'connections' | 'channelFaults' | 'scan'> {
  const { rig, rigState, fitted, run } = engine;
  const { phase, isLockedOut, trip } = rigState;
  /** Once armed, the checklist has been passed and the watches take over. */
  const isBeforeArming = phase === 'idle' || phase === 'offline' || phase === 'tripped';
  const { obstacles } = isBeforeArming ? checkArming(engine) : { obstacles: [] };
  return {
    rigId: rig.id,
    phase,
    isLockedOut,
    trip: trip ? { ...trip, later: [...trip.later] } : null,
    runId: run?.order.runId ?? null,
    activeSteps: [...(run?.activeSteps ?? [])],
    isPaused: run?.isPaused ?? false,
    envelopeVersion: fitted?.inForce.version ?? null,
    interlocks: fitted?.interlocks.status() ?? [],
    heldMoves: heldMovesOf(fitted?.actuators ?? []),
    armingObstacles: obstacles.map(({ message }) => message),
    bestPoint: run ? bestPoint(run.order.experiment.graph, run.sequencer) : { ...engine.lastBestPoint },
  };
}
