import { DomainError, type HostCommand, type RigPhase, type RigStatus } from '@cresthold/shared';
import { RigHostsPort } from '../../src/rigs/rig-hosts.port.js';

/** Rig hosts that remember what they were asked; a rig has a host once its phase is set. */
export class FakeRigHosts extends RigHostsPort {
  readonly commands: { rigId: string; command: HostCommand }[] = [];
  readonly reconfigured: string[] = [];
  /** What every command is answered with; null lets it succeed. */
  refusal: DomainError | null = null;
  private readonly phases = new Map<string, RigPhase>();

  setPhase(rigId: string, phase: RigPhase): void {
    this.phases.set(rigId, phase);
  }

  status(rigId: string): RigStatus | null {
    const phase = this.phases.get(rigId);
    return phase === undefined ? null : statusOf(rigId, phase);
  }

  command(rigId: string, command: HostCommand): Promise<void> {
    if (this.status(rigId) === null) return Promise.reject(new DomainError('host.unavailable'));
    if (this.refusal !== null) return Promise.reject(this.refusal);
    this.commands.push({ rigId, command });
    return Promise.resolve();
  }

  reconfigure(rigId: string): Promise<void> {
    this.reconfigured.push(rigId);
    return Promise.resolve();
  }
}

function statusOf(rigId: string, phase: RigPhase): RigStatus {
  return {
    rigId,
    phase,
    isLockedOut: false,
    trip: null,
    runId: null,
    activeSteps: [],
    isPaused: false,
    envelopeVersion: null,
    connections: [],
    channelFaults: [],
    interlocks: [],
    heldMoves: [],
    armingObstacles: [],
    bestPoint: {},
    scan: { count: 0, overruns: 0, latenessP99Ms: 0, wireMeanMs: 0 },
  };
}
