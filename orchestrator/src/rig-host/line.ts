import {
  keepConnected,
  type Adapter,
  type AdapterSession,
  type KeptConnection,
  type LinkStatus,
  type ProbeOutcome,
  type ReadOutcome,
  type ReadPlan,
  type WriteOutcome,
} from '@cresthold/adapters';
import {
  DomainError,
  Quality,
  tracePointsMax,
  type Connection,
  type Readings,
  type ValueGrid,
  type WiredChannel,
} from '@cresthold/shared';
import type { Gathering } from './gathering.js';
import { monotonicS } from './monotonic-clock.js';
import { PendingWrites } from './pending-writes.js';

export interface LineChannel {
  channel: WiredChannel;
  /** Index in the rig's channel list. */
  index: number;
  address: unknown;
}

/** Why a channel is not delivered. */
export interface ChannelFault {
  channel: string;
  code: string;
  message: string;
}

export interface LineOwner {
  /** The connection opened. */
  onLineOpened(): void;
  /** It opened, was lost, or could not be opened. */
  onLineChanged(): void;
  /** A request threw: a bug of the adapter. */
  onBug(error: unknown): void;
}

const notANumber = {
  code: 'adapter.corrupt',
  message: 'The device answers with something that is no number.',
};
const noTrace = {
  code: 'adapter.corrupt',
  message: `The device answers with a trace of no points, of more than ${tracePointsMax}, or with a point that is no number.`,
};
const notYet = { code: 'adapter.disconnected', message: 'Not connected yet.' };

const noPoints = new Float64Array(0);

/** A trace needs an address with points, every other channel one without. */
function requirePoints({ id, kind }: WiredChannel, points: number): void {
  if ((kind === 'trace') === points > 1) return;
  const message =
    kind === 'trace'
      ? `The address of trace "${id}" gives one value only: give it points.`
      : `The address of ${kind} "${id}" gives ${points} points: make it a trace.`;
  throw new DomainError('adapter.misconfigured', message);
}

/** One connection's share in each scan: one planned read, then the writes of its actuators. */
export class Line {
  /** Settles when the first attempt to open has succeeded or failed. */
  readonly firstAttempt: Promise<void>;
  /** Grids of its actuators by channel id, known once it has been open. */
  readonly grids = new Map<string, ValueGrid>();
  private kept: KeptConnection | null = null;
  private session: AdapterSession<unknown> | null = null;
  private settleFirst: () => void = () => undefined;
  private plan: ReadPlan | null = null;
  /** Why it was lost since the scan before last looked; it may be open again. */
  private lastLoss: DomainError | null = null;
  private isBusy = false;
  /** The readings are of this scan, or arrived since the scan before. */
  private isFresh = false;
  private hasBeenRead = false;
  private startedInRound = 0;
  private readonly writes: PendingWrites;
  /** Last good values as the adapter gave them, and when they came, s; NaN before the first. */
  private readonly givenValues: Float64Array;
  private readonly givenAtS: Float64Array;
  /** What the last read said of each channel. */
  private readonly faults: (DomainError | null)[];

  constructor(
    readonly definition: Connection,
    private readonly adapter: Adapter,
    private readonly configuration: unknown,
    private readonly channels: readonly LineChannel[],
    private readonly readings: Readings,
    private readonly gathering: Gathering,
    private readonly owner: LineOwner,
  ) {
    this.faults = channels.map(() => null);
    this.givenValues = new Float64Array(channels.length).fill(NaN);
    this.givenAtS = new Float64Array(channels.length).fill(NaN);
    this.writes = new PendingWrites(new Map(channels.map((c) => [c.index, c.address])));
    this.firstAttempt = new Promise((resolve) => (this.settleFirst = resolve));
  }

  /** Begins to keep the connection open. */
  open(): void {
    this.kept = keepConnected(this.adapter, this.configuration, {
      onOpen: (session) => this.use(session),
      onLost: (error) => this.drop(error),
      onStatus: (status) => this.follow(status),
    });
  }

  async close(): Promise<void> {
    this.session = null;
    await this.kept?.close();
  }

  /** Why it is not open; null while nothing is known to be wrong. */
  get error(): DomainError | null {
    return this.kept?.status.error ?? null;
  }

  get isConnected(): boolean {
    return this.session !== null;
  }

  /** Whether one address can be tried by itself now. */
  get canProbe(): boolean {
    return this.session?.probe !== undefined;
  }

  /** Tries the address of a channel by itself, between two scans; null where that cannot be done now. */
  async probe(channelIndex: number): Promise<ProbeOutcome | null> {
    const wired = this.channels.find(({ index }) => index === channelIndex);
    if (wired === undefined) return null;
    return (await this.session?.probe?.(wired.address)) ?? null;
  }

  /** What the scan last got of a channel: value as the adapter gave it, its age in s, and the last fault. */
  lastReading(channelIndex: number): { value: number; ageS: number; fault: DomainError | null } {
    const at = this.channels.findIndex(({ index }) => index === channelIndex);
    return {
      value: this.givenValues[at] ?? NaN,
      ageS: monotonicS() - (this.givenAtS[at] ?? NaN),
      fault: this.session === null ? this.error : (this.faults[at] ?? null),
    };
  }

  /** Channels that the last read did not bring although the line is up. */
  channelFaults(): ChannelFault[] {
    if (this.session === null || !this.hasBeenRead) return [];
    return this.channels.flatMap(({ channel, index }, at) => {
      const isBad = this.readings.qualities[index] === Quality.bad;
      const fault = this.faults[at] ?? (isBad ? (channel.kind === 'trace' ? noTrace : notANumber) : null);
      return fault ? [{ channel: channel.id, code: fault.code, message: fault.message }] : [];
    });
  }

  /** @returns why it is down, or was since this was last asked; null where it was up throughout */
  takeLoss(): { code: string; message: string } | null {
    const loss = this.session === null ? (this.error ?? this.lastLoss ?? notYet) : this.lastLoss;
    this.lastLoss = null;
    return loss;
  }

  /** @realtime begins the read of this scan, unless the line is still busy with the one before */
  startRead(): void {
    if (this.session === null || this.plan === null || this.isBusy) return;
    this.isBusy = true;
    this.startedInRound = this.gathering.round;
    this.gathering.expect();
    this.session.read(this.plan).then(this.afterRead, this.afterBug);
  }

  /** @realtime marks what was not read in time; called once the scan has waited for its reads */
  settleReadings(): void {
    if (!this.isFresh) {
      const isStale = this.session !== null && this.hasBeenRead;
      for (const { index } of this.channels) this.mark(index, isStale ? Quality.stale : Quality.missing);
    }
    this.isFresh = false;
  }

  /** @realtime */
  queueWrite(channelIndex: number, value: number): void {
    if (this.session !== null) this.writes.put(channelIndex, value);
  }

  /** @realtime sends what is queued, now or as soon as the request under way has ended */
  startWrite(): void {
    if (this.session === null || this.isBusy || this.writes.isEmpty) return;
    this.isBusy = true;
    this.startedInRound = this.gathering.round;
    this.gathering.expect();
    const { addresses, values } = this.writes.take();
    this.session.write(addresses, values).then(this.afterWrite, this.afterBug);
  }

  private use(session: AdapterSession<unknown>): void {
    for (const { channel, address } of this.channels) {
      const facts = session.describe(address);
      requirePoints(channel, facts.points ?? 1);
      if (channel.kind !== 'actuator') continue;
      if (!facts.isWritable) {
        const message = `The address of actuator "${channel.id}" cannot be written.`;
        throw new DomainError('adapter.misconfigured', message);
      }
      this.grids.set(channel.id, { step: facts.quantum, origin: facts.quantumOrigin });
    }
    this.plan = session.planRead(this.channels.map((c) => c.address));
    this.session = session;
    this.owner.onLineOpened();
    this.owner.onLineChanged();
    this.settleFirst();
  }

  private drop(error: DomainError): void {
    this.session = null;
    this.lastLoss = error;
    this.isFresh = false;
    this.writes.clear();
  }

  private follow({ state }: LinkStatus): void {
    if (state === 'closed' || state === 'opening') return;
    if (state !== 'open') this.settleFirst();
    this.owner.onLineChanged();
  }

  private readonly afterRead = (outcome: ReadOutcome): void => {
    if (outcome.lost === null) this.take(outcome);
    this.release();
  };

  private readonly afterWrite = (outcome: WriteOutcome): void => {
    if (outcome.lost === null) this.writes.settle(outcome.faults);
    this.release();
  };

  private readonly afterBug = (error: unknown): void => {
    this.owner.onBug(error);
    this.release();
  };

  /** The line is free again; a write that came while it was busy goes out at once. */
  private release(): void {
    const round = this.startedInRound;
    this.isBusy = false;
    this.gathering.arrive(round);
    if (this.writes.hasNew) this.startWrite();
  }

  private take(outcome: ReadOutcome): void {
    for (let i = 0; i < this.channels.length; i += 1) {
      const channel = this.channels[i];
      if (channel === undefined) continue;
      const fault = outcome.faults[i] ?? null;
      this.faults[i] = fault;
      if (fault === null) this.put(channel, i, outcome);
      else this.mark(channel.index, this.qualityOf(fault));
    }
    this.isFresh = true;
    this.hasBeenRead = true;
  }

  private put({ channel, index }: LineChannel, at: number, { values, traces }: ReadOutcome): void {
    if (channel.kind === 'trace') this.readings.setTrace(index, traces?.[at] ?? noPoints);
    else this.readings.set(index, values[at] ?? NaN, Quality.good);
    this.givenValues[at] = values[at] ?? NaN;
    this.givenAtS[at] = monotonicS();
  }

  private qualityOf(fault: DomainError): Quality {
    if (fault.code === 'adapter.refused' || fault.code === 'adapter.corrupt') return Quality.bad;
    return this.hasBeenRead ? Quality.stale : Quality.missing;
  }

  /** Keeps the last value known. */
  private mark(index: number, quality: Quality): void {
    this.readings.qualities[index] = quality;
  }
}
