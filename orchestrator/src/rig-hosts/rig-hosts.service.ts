import {
  Inject,
  Injectable,
  Logger,
  type BeforeApplicationShutdown,
  type OnApplicationBootstrap,
} from '@nestjs/common';
import {
  channelProbeSchema,
  DomainError,
  type ChannelProbe,
  type HostCommand,
  type RigStatus,
  type Trip,
} from '@cresthold/shared';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { CalibrationStore } from '../calibrations/calibration-store.js';
import { EnvelopeStore } from '../envelopes/envelope-store.js';
import { RunRecords } from '../recordings/run-records.service.js';
import type { RigHostsPort } from '../rigs/rig-hosts.port.js';
import { RigStore } from '../rigs/rig-store.js';
import { HostFeed } from './host-feed.js';
import { LatchedTrips } from './latched-trips.service.js';
import { RigHost } from './rig-host.js';
import { RIG_HOST_SETTINGS, type RigHostSettings } from './rig-host-settings.js';

/** Between two attempts to begin hosts that could not be begun. */
const retryEveryMs = 15_000;

/** One rig host for every rig: brought up with the server, kept up, ended in order with it. */
@Injectable()
export class RigHostsService implements RigHostsPort, OnApplicationBootstrap, BeforeApplicationShutdown {
  private readonly logger = new Logger('RigHosts');
  private readonly hosts = new Map<string, RigHost>();
  private retryTimer: NodeJS.Timeout | null = null;
  private isEnding = false;

  constructor(
    @Inject(CONFIG) private readonly config: Config,
    @Inject(RIG_HOST_SETTINGS) private readonly settings: RigHostSettings,
    private readonly rigs: RigStore,
    private readonly envelopes: EnvelopeStore,
    private readonly calibrations: CalibrationStore,
    private readonly records: RunRecords,
    private readonly trips: LatchedTrips,
    private readonly feed: HostFeed,
  ) {}

  /** Begins the hosts without waiting for them: a rig that cannot be reached must not hold up the server. */
  async onApplicationBootstrap(): Promise<void> {
    await this.records.sealRest();
    for (const { id } of await this.rigs.all()) this.begin(this.add(id));
    this.retryTimer = setInterval(() => this.retry(), retryEveryMs);
  }

  /** Every rig is brought to rest and its run closed before the database goes. */
  async beforeApplicationShutdown(): Promise<void> {
    this.isEnding = true;
    if (this.retryTimer) clearInterval(this.retryTimer);
    await Promise.all([...this.hosts.values()].map((host) => host.stop()));
    await this.records.drain();
  }

  status(rigId: string): RigStatus | null {
    return this.hosts.get(rigId)?.heard ?? null;
  }

  /** The status of a rig, told by its host or, while there is none, by what the server knows. */
  async currentStatus(rigId: string): Promise<RigStatus> {
    return (await this.host(rigId)).status();
  }

  /** The status of every rig. */
  async statuses(): Promise<RigStatus[]> {
    const hosts = [...this.hosts.values()];
    return Promise.all(hosts.map((host) => host.status()));
  }

  /** Why each rig's host is not up; null where it is. */
  faults(): { rigId: string; fault: string | null }[] {
    return [...this.hosts.values()].map((host) => ({ rigId: host.rigId, fault: host.process.fault }));
  }

  async command(rigId: string, command: HostCommand): Promise<void> {
    await (await this.host(rigId)).request(command);
  }

  /**
   * Live test of one channel.
   *
   * @throws rig.not-found, channel.not-found, host.unavailable, host.timeout
   */
  async probe(rigId: string, channel: string): Promise<ChannelProbe> {
    const data = await (await this.host(rigId)).request({ type: 'probe', channel });
    const probe = channelProbeSchema.safeParse(data);
    if (!probe.success)
      throw new DomainError('host.unavailable', 'The rig host answered with no test result.');
    return probe.data;
  }

  async reconfigure(rigId: string): Promise<void> {
    const host = this.hosts.get(rigId) ?? this.add(rigId);
    if (host.process.state.name === 'up') await host.process.reconfigure();
    else this.begin(host);
  }

  /**
   * Stops a rig at once and latches it, whatever its state: with no host to hear it, the trip is kept for
   * the next one. Resolves when the latch is on disk.
   *
   * @throws rig.not-found
   */
  async emergencyStop(rigId: string, by: string, reason: string): Promise<RigStatus> {
    const host = await this.host(rigId);
    const command: HostCommand = { type: 'emergency-stop', by, reason };
    const at = new Date().toISOString();
    const trip: Trip = { cause: 'emergency-stop', message: reason, at, by, later: [] };
    try {
      await host.request(command);
      await this.trips.latchFirst(rigId, trip);
    } catch (error) {
      this.logger.warn(`Rig "${rigId}": its host did not take the emergency stop. ${String(error)}`);
      await this.trips.latch(rigId, trip);
      // It may have come up in between, with what was on disk before.
      if (host.heard?.trip === null) await host.request(command);
    }
    return host.statusAfterCommand();
  }

  /** @returns for each rig its status after the stop */
  async emergencyStopAll(by: string, reason: string): Promise<RigStatus[]> {
    const rigIds = [...this.hosts.keys()];
    return Promise.all(rigIds.map((rigId) => this.emergencyStop(rigId, by, reason)));
  }

  /**
   * Clears a latched trip where its cause is gone; moves nothing.
   *
   * @throws rig.not-tripped, rig.cause-present, host.unavailable
   */
  async reset(rigId: string, by: string, reason: string): Promise<RigStatus> {
    const host = await this.host(rigId);
    const trip = (await this.rigs.state(rigId)).trip;
    await host.request({ type: 'reset', by, reason });
    // What the host told before it answered is kept first, so that it cannot come back after the reset.
    await host.settle();
    if (trip) await this.trips.clear(rigId, trip, { by, reason });
    host.process.forgetDeaths();
    return host.statusAfterCommand();
  }

  /** Tells a host of a lockout that is on disk already; without one the next host reads it there. */
  async setLockout(rigId: string, isLockedOut: boolean): Promise<RigStatus> {
    const host = await this.host(rigId);
    if (host.heard === null) return host.status();
    await host.request({ type: 'set-lockout', isLockedOut });
    return host.statusAfterCommand();
  }

  /** Sends a command and answers with the status that follows it. */
  async commandForStatus(rigId: string, command: HostCommand): Promise<RigStatus> {
    return (await this.commandForAnswer(rigId, command)).status;
  }

  /** As `commandForStatus`, with what the host found out. */
  async commandForAnswer(rigId: string, command: HostCommand): Promise<{ data: unknown; status: RigStatus }> {
    const host = await this.host(rigId);
    const data = await host.request(command);
    return { data, status: await host.statusAfterCommand() };
  }

  /** @throws rig.not-found */
  private async host(rigId: string): Promise<RigHost> {
    const host = this.hosts.get(rigId);
    if (host) return host;
    const rig = await this.rigs.find(rigId);
    if (!rig) throw new DomainError('rig.not-found', `There is no rig "${rigId}".`);
    return this.add(rigId);
  }

  private add(rigId: string): RigHost {
    const { config, rigs, envelopes, calibrations, records, trips, feed, logger } = this;
    const host = new RigHost(
      rigId,
      { ...this.settings, dataFolder: config.dataFolder, plugIns: config.plugIns },
      { rigs, envelopes, calibrations, records, trips, feed, logger },
    );
    this.hosts.set(rigId, host);
    return host;
  }

  private begin(host: RigHost): void {
    if (this.isEnding) return;
    // What went wrong is in the log and in the rig's status.
    host.process.start().catch(() => undefined);
  }

  /** What kept a host from beginning, e.g. an earlier one that still lived, may have gone by now. */
  private retry(): void {
    for (const host of this.hosts.values()) {
      if (host.process.state.name === 'failed' && host.isWorthRetry) this.begin(host);
    }
  }
}
