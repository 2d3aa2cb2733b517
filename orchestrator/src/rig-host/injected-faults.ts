import { FaultControl, withFaults, type Adapter } from '@cresthold/adapters';
import { DomainError, type InjectedFault, type Rig, type WireFault } from '@cresthold/shared';
import type { LineChannel } from './line.js';

interface FaultyLine {
  control: FaultControl;
  channels: readonly LineChannel[];
  injected: Omit<InjectedFault, 'isActive'> | null;
}

/**
 * Faults that people put on the connections of a bench. The wires of any other rig are never wrapped, so that
 * nothing can put a fault on them. Kept in this process only: a host that begins anew has none.
 */
export class InjectedFaults {
  private readonly lines = new Map<string, FaultyLine>();

  constructor(private readonly rig: Rig) {}

  /** The adapter through which the connection is to be opened. */
  wrap(connection: string, adapter: Adapter, channels: readonly LineChannel[]): Adapter {
    if (!this.rig.isBench) return adapter;
    const control = new FaultControl();
    this.lines.set(connection, { control, channels, injected: null });
    return withFaults(adapter, control);
  }

  /**
   * Puts a fault on a connection in place of the one before, or takes it off.
   *
   * @throws rig.not-a-bench, connection.not-found, channel.not-found
   */
  set(connection: string, fault: WireFault | null, by: string): void {
    if (!this.rig.isBench) throw new DomainError('rig.not-a-bench');
    const line = this.lines.get(connection);
    if (!line) throw new DomainError('connection.not-found', `The rig has no connection "${connection}".`);
    if (fault === null) {
      line.control.clear();
      line.injected = null;
    } else {
      line.control.put(fault, addressesOf(line, connection, fault.channels));
      line.injected = { fault, by, at: new Date().toISOString() };
    }
  }

  status(connection: string): InjectedFault | null {
    const line = this.lines.get(connection);
    return line?.injected ? { ...line.injected, isActive: line.control.isActive } : null;
  }
}

function addressesOf(
  { channels }: FaultyLine,
  connection: string,
  wanted: readonly string[] | null,
): unknown[] | null {
  if (wanted === null) return null;
  return wanted.map((id) => {
    const found = channels.find(({ channel }) => channel.id === id);
    if (found) return found.address;
    const message = `Connection "${connection}" carries no channel "${id}".`;
    throw new DomainError('channel.not-found', message, [{ field: 'fault.channels', message }]);
  });
}
