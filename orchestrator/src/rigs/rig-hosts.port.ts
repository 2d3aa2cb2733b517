import type { HostCommand, RigStatus } from '@cresthold/shared';

/**
 * What the documents' side of the server needs of the supervisor of rig hosts. Implemented in `rig-hosts/`
 * by a global module, which itself reads rigs, states and envelopes through `RigStore` and `EnvelopeStore`,
 * never through the services that depend on this port.
 */
export abstract class RigHostsPort {
  /** The last status that the rig's host told; null where no host runs for the rig. */
  abstract status(rigId: string): RigStatus | null;

  /**
   * Sends a command and resolves once the host has carried it out.
   *
   * @throws host.unavailable where no host runs for the rig
   * @throws host.timeout
   * @throws whatever the host answers, e.g. rig.illegal-move; nothing has then changed
   */
  abstract command(rigId: string, command: HostCommand): Promise<void>;

  /**
   * The rig's documents in the database have changed: starts its host, or configures the one that runs, with
   * rig, envelope in force, trip and lockout as they are stored now. Called only while the rig is idle,
   * offline or tripped. Resolves when the host has been told or is being started; a rig that cannot be
   * reached is no error here.
   */
  abstract reconfigure(rigId: string): Promise<void>;
}
