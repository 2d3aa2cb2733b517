import { setTimeout as sleep } from 'node:timers/promises';
import type { Logger } from '@nestjs/common';
import { DomainError, type FromHost, type HostCommand, type RigStatus, type Trip } from '@cresthold/shared';
import type { CalibrationStore } from '../calibrations/calibration-store.js';
import type { Config } from '../config/config.schema.js';
import type { EnvelopeStore } from '../envelopes/envelope-store.js';
import { firstValueFrom, Subject } from 'rxjs';
import type { RunRecords } from '../recordings/run-records.service.js';
import type { RigStore } from '../rigs/rig-store.js';
import type { HostFeed } from './host-feed.js';
import { hostFiles } from './host-files.js';
import type { LatchedTrips } from './latched-trips.service.js';
import { statusWithoutHost } from './offline-status.js';
import { RigHostProcess, type HostConfiguration, type RigHostOwner } from './rig-host-process.js';
import type { HostDeath, HostProgram } from './supervision/host-life.js';
import { HostPidFile } from './supervision/host-pid-file.js';
import type { RigHostSettings } from './rig-host-settings.js';

export interface RigHostParts {
  rigs: RigStore;
  envelopes: EnvelopeStore;
  calibrations: CalibrationStore;
  trips: LatchedTrips;
  records: RunRecords;
  feed: HostFeed;
  logger: Logger;
}

/** Longest wait for the status after a command, ms: one scan on a slow wire. */
const statusBoundMs = 1_500;
/** How long host and server may differ on whether a run is open, ms. */
const disagreementMs = 10_000;

/** One rig: its host process, and what the server keeps in step with it. */
export class RigHost implements RigHostOwner {
  readonly process: RigHostProcess;
  private readonly pidFile: HostPidFile;
  private lastStatus: RigStatus | null = null;
  private lastTrip: Trip | null = null;
  /** Everything that follows from messages, in their order. */
  private tail: Promise<void> = Promise.resolve();
  private idleSinceMs: number | null = null;
  private isHeldByEarlierHost = false;
  private readonly nextStatus = new Subject<void>();

  constructor(
    readonly rigId: string,
    private readonly settings: RigHostSettings & Pick<Config, 'dataFolder' | 'plugIns'>,
    private readonly parts: RigHostParts,
  ) {
    this.process = new RigHostProcess(this, settings.timing, settings.restartPolicy);
    this.pidFile = new HostPidFile(hostFiles(settings.dataFolder, rigId).pidFile);
  }

  /** The host's last word where it is up, else what the server knows by itself. */
  async status(): Promise<RigStatus> {
    if (this.lastStatus && this.process.state.name === 'up') return this.lastStatus;
    const { trip, isLockedOut } = await this.parts.rigs.state(this.rigId);
    return statusWithoutHost(this.rigId, trip, isLockedOut, this.process.fault ?? 'The rig host is silent.');
  }

  /** The host's last word; null while it is not up. */
  get heard(): RigStatus | null {
    return this.process.state.name === 'up' ? this.lastStatus : null;
  }

  /** True where the host could not be begun for a reason that may pass by itself. */
  get isWorthRetry(): boolean {
    return this.isHeldByEarlierHost;
  }

  /** The status that the host tells after a command it has answered; its last one where it is slow. */
  async statusAfterCommand(): Promise<RigStatus> {
    const next = firstValueFrom(this.nextStatus, { defaultValue: undefined });
    await Promise.race([next, sleep(statusBoundMs, undefined, { ref: false })]);
    await this.settle();
    return this.status();
  }

  /** A person's command to a host that has failed is also the word to begin it again. */
  async request(command: HostCommand): Promise<unknown> {
    if (this.process.state.name !== 'failed') return this.process.request(command);
    const text = `${this.process.fault} It is begun again now: try again in a moment.`;
    this.process.start().catch(() => undefined);
    throw new DomainError('host.unavailable', text);
  }

  /** Resolves when everything heard so far is on disk. */
  async settle(): Promise<void> {
    await this.tail;
  }

  /** Ends the host in order; a run that it did not report as ended is marked. */
  async stop(): Promise<void> {
    await this.process.stop();
    await this.settle();
    await this.interruptOpenRun('The rig host was ended before it reported the end of the run.');
    this.pidFile.remove();
  }

  async prepare(signal: AbortSignal): Promise<HostProgram> {
    this.isHeldByEarlierHost = true;
    await this.pidFile.waitUntilGone(this.settings.orphanWaitMs, signal);
    this.isHeldByEarlierHost = false;
    const reason = 'The server ended while the run was going on.';
    if (await this.interruptOpenRun(reason)) await this.latch('server-silent', reason);
    const { outputFile } = hostFiles(this.settings.dataFolder, this.rigId);
    return { file: this.settings.program, args: [this.rigId, ...this.settings.plugIns], outputFile };
  }

  onForked(pid: number): void {
    this.pidFile.write(pid);
  }

  async configuration(): Promise<HostConfiguration> {
    const { rigs, envelopes, calibrations } = this.parts;
    const { content: rig } = await rigs.get(this.rigId);
    const { trip, isLockedOut } = await rigs.state(this.rigId);
    const envelope = await envelopes.inForce(this.rigId);
    return {
      type: 'configure',
      rig,
      envelope,
      trip,
      isLockedOut,
      calibrations: await calibrations.inForce(this.rigId),
    };
  }

  onMessage(message: FromHost): void {
    const { feed, records } = this.parts;
    switch (message.type) {
      case 'status':
        return this.onStatus(message.status);
      case 'telemetry':
        return feed.telemetry.next(message.telemetry);
      case 'trace':
        return feed.traces.next(message.trace);
      case 'interlock-response':
        return feed.interlockResponses.next({ rigId: this.rigId, response: message.response });
      case 'run-event':
        return feed.runEvents.next({ rigId: this.rigId, runId: message.runId, event: message.event });
      case 'run-status':
        return this.keepInOrder(() => records.follow(message.runId, message.status));
      case 'run-ended': {
        const { status, verdict, reason, results, scans } = message;
        return this.keepInOrder(() =>
          records.end(message.runId, { status, verdict, reason, results, scans }),
        );
      }
      case 'stop-trajectory':
        return this.keepInOrder(() =>
          this.parts.trips.keepTrajectory(this.rigId, message.trip, message.trajectory),
        );
      case 'log':
        return this.onLog(message.level, message.text);
      case 'ready':
      case 'reply':
        return;
    }
  }

  async onDeath(death: HostDeath): Promise<void> {
    this.lastStatus = null;
    await this.settle();
    const reason = `The rig host was lost. ${death.message}`;
    await this.interruptOpenRun(reason);
    await this.latch('host-lost', reason);
    this.parts.feed.statuses.next(await this.status());
  }

  onLog(level: 'info' | 'warn' | 'error', text: string): void {
    const line = `Rig "${this.rigId}": ${text}`;
    if (level === 'info') this.parts.logger.log(line);
    else this.parts.logger[level](line);
  }

  private onStatus(status: RigStatus): void {
    this.lastStatus = status;
    this.nextStatus.next();
    this.parts.feed.statuses.next(status);
    const { trip } = status;
    if (trip && JSON.stringify(trip) !== JSON.stringify(this.lastTrip)) {
      this.keepInOrder(() => this.parts.trips.follow(this.rigId, trip));
    }
    this.lastTrip = trip;
    this.compare(status.runId === null);
  }

  /** A run that the server thinks open and the host does not know has ended without a word. */
  private compare(isHostIdle: boolean): void {
    const nowMs = performance.now();
    if (!isHostIdle) this.idleSinceMs = null;
    else this.idleSinceMs ??= nowMs;
    if (this.idleSinceMs === null || nowMs - this.idleSinceMs < disagreementMs) return;
    this.idleSinceMs = nowMs;
    this.keepInOrder(async () => {
      const run = await this.parts.records.openRunOf(this.rigId);
      if (!run || Date.now() - Date.parse(run.startedAt) < disagreementMs) return;
      await this.parts.records.interrupt(run, 'The rig host no longer knows of the run.');
    });
  }

  private async interruptOpenRun(reason: string): Promise<boolean> {
    const run = await this.parts.records.openRunOf(this.rigId);
    if (run) await this.parts.records.interrupt(run, reason);
    return run !== null;
  }

  private latch(cause: string, message: string): Promise<void> {
    const at = new Date().toISOString();
    return this.parts.trips.latch(this.rigId, { cause, message, at, by: null, later: [] });
  }

  private keepInOrder(work: () => Promise<void>): void {
    this.tail = this.tail.then(work).catch((error: unknown) => {
      this.onLog('error', `What the host reported could not be kept: ${String(error)}`);
    });
  }
}
