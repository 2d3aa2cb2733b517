import type { RigStatus, Trip } from '@cresthold/shared';

/** What can be said of a rig whose host is not there to say it. */
export function statusWithoutHost(
  rigId: string,
  trip: Trip | null,
  isLockedOut: boolean,
  obstacle: string,
): RigStatus {
  return {
    rigId,
    phase: trip ? 'tripped' : 'offline',
    isLockedOut,
    trip,
    runId: null,
    activeSteps: [],
    isPaused: false,
    envelopeVersion: null,
    connections: [],
    channelFaults: [],
    interlocks: [],
    heldMoves: [],
    armingObstacles: [obstacle],
    bestPoint: {},
    scan: { count: 0, overruns: 0, latenessP99Ms: 0, wireMeanMs: 0 },
  };
}
