import type { Adapter } from '@cresthold/adapters';
import {
  DomainError,
  type Readings,
  type Rig,
  type RigStatus,
  type ValueGrid,
  type WireFault,
} from '@cresthold/shared';
import { Gathering } from './gathering.js';
import { InjectedFaults } from './injected-faults.js';
import { Line, type LineChannel } from './line.js';
import { within } from './within.js';

export type LostConnection = { connection: string; code: string; message: string };

/**
 * A scan waits for its requests for one period, and at least this long, ms. A late scan is only counted,
 * a stale reading may trip: so hiccups of device and computer are waited for, and a dead device is not.
 */
const waitMinMs = 250;
const notYet = 'Not connected yet.';

/**
 * All connections of one rig. Each scan reads them side by side and writes each in order; a connection
 * that does not answer in time leaves its channels stale and does not hold up the others.
 */
export class Wire {
  private readonly lines: Line[];
  private readonly lineByChannel: (Line | undefined)[];
  private readonly indexByChannel = new Map<string, number>();
  private readonly gathering: Gathering;
  private readonly faults: InjectedFaults;
  private lost: LostConnection[] = [];

  /**
   * @param onOpened a connection opened: the grids of its actuators are known
   * @param onChanged a connection opened, was lost, or could not be opened
   * @param onBug an adapter threw where its contract forbids it
   * @throws adapter.unknown, adapter.misconfigured naming the field at fault
   */
  constructor(
    private readonly rig: Rig,
    adapters: ReadonlyMap<string, Adapter>,
    private readonly readings: Readings,
    onOpened: () => void,
    onChanged: () => void,
    onBug: (error: unknown) => void,
  ) {
    this.faults = new InjectedFaults(rig);
    const gathering = new Gathering(Math.max(waitMinMs, rig.periodMs));
    this.gathering = gathering;
    rig.channels.forEach((channel, index) => this.indexByChannel.set(channel.id, index));
    const owner = { onLineOpened: onOpened, onLineChanged: onChanged, onBug };
    this.lines = rig.connections.map((definition, at) => {
      const adapter = adapters.get(definition.adapter);
      if (adapter === undefined) throw unknownAdapter(definition.adapter, at);
      const { configurationSchema } = adapter.manifest;
      const field = `connections[${at}].configuration`;
      const configuration = parsed(configurationSchema, definition.configuration, field);
      const channels = channelsOf(rig, definition.id, adapter);
      const wired = this.faults.wrap(definition.id, adapter, channels);
      return new Line(definition, wired, configuration, channels, this.readings, gathering, owner);
    });
    this.lineByChannel = rig.channels.map((channel) =>
      channel.kind === 'derived' ? undefined : this.lines.find((l) => l.definition.id === channel.connection),
    );
  }

  /** Begins to open every connection; resolves when each was tried once, or after `boundMs`. */
  async open(boundMs: number): Promise<void> {
    this.gathering.start();
    for (const line of this.lines) line.open();
    await within(Promise.all(this.lines.map((line) => line.firstAttempt)), boundMs, undefined);
  }

  async close(): Promise<void> {
    await Promise.all(this.lines.map((line) => line.close()));
    this.gathering.close();
  }

  /**
   * Connections that are down, or were since the scan before: a loss shorter than a period is not hidden.
   *
   * @realtime allocates only while something is lost
   */
  takeLost(): readonly LostConnection[] {
    if (this.lost.length > 0) this.lost = [];
    for (const line of this.lines) {
      const loss = line.takeLoss();
      if (loss === null) continue;
      this.lost.push({ connection: line.definition.id, code: loss.code, message: loss.message });
    }
    return this.lost;
  }

  get areAllDown(): boolean {
    return this.lines.every((line) => !line.isConnected);
  }

  /** Grids of the actuators whose connection has been open. */
  grids(): [string, ValueGrid][] {
    return this.lines.flatMap((line) => [...line.grids]);
  }

  connectionStatus(): RigStatus['connections'] {
    return this.lines.map((line) => ({
      id: line.definition.id,
      isConnected: line.isConnected,
      error: line.isConnected ? null : (line.error?.message ?? notYet),
      injectedFault: this.faults.status(line.definition.id),
    }));
  }

  /** @throws rig.not-a-bench, connection.not-found, channel.not-found */
  setFault(connection: string, fault: WireFault | null, by: string): void {
    this.faults.set(connection, fault, by);
  }

  /** The connection of a channel; undefined for one that has none. */
  lineOf(channelIndex: number): Line | undefined {
    return this.lineByChannel[channelIndex];
  }

  channelFaults(): RigStatus['channelFaults'] {
    return this.lines.flatMap((line) => line.channelFaults());
  }

  /** @realtime fills the readings of this scan */
  async read(): Promise<void> {
    this.gathering.begin();
    for (const line of this.lines) line.startRead();
    const wait = this.gathering.all();
    if (wait !== null) await wait;
    for (const line of this.lines) line.settleReadings();
  }

  /** @realtime @returns null where nothing is on the wire */
  write(writes: readonly { channel: string; value: number }[]): Promise<void> | null {
    this.gathering.begin();
    for (const { channel, value } of writes) {
      const index = this.indexByChannel.get(channel) ?? -1;
      this.lineByChannel[index]?.queueWrite(index, value);
    }
    for (const line of this.lines) line.startWrite();
    return this.gathering.all();
  }
}

function channelsOf(rig: Rig, connection: string, adapter: Adapter): LineChannel[] {
  const channels: LineChannel[] = [];
  rig.channels.forEach((channel, index) => {
    if (channel.kind === 'derived' || channel.connection !== connection) return;
    const address = parsed(adapter.manifest.addressSchema, channel.address, `channels[${index}].address`);
    channels.push({ channel, index, address });
  });
  return channels;
}

function parsed(schema: Adapter['manifest']['configurationSchema'], value: unknown, field: string): unknown {
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  const details = result.error.issues.map(({ path, message }) => ({
    field: [field, ...path].join('.'),
    message,
  }));
  const first = details[0];
  throw new DomainError('adapter.misconfigured', `${first?.field}: ${first?.message}`, details);
}

function unknownAdapter(adapter: string, at: number): DomainError {
  const message = `No adapter "${adapter}" is installed.`;
  return new DomainError('adapter.unknown', message, [{ field: `connections[${at}].adapter`, message }]);
}
