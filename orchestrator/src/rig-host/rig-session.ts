import type { Adapter } from '@cresthold/adapters';
import {
  createScanEngine,
  createSequencer,
  preflight,
  type EnvelopeInForce,
  type HostCommand,
  type Rig,
  type RigStatus,
  type RunOrder,
  type ScanEngine,
  type ValueGrid,
  type WireFault,
} from '@cresthold/shared';
import { ChannelProber } from './channel-prober.js';
import { HeldMoveLog } from './held-move-log.js';
import { InterlockStopwatch } from './interlock-stopwatch.js';
import { PeriodPacer } from './pacer.js';
import { Publisher } from './publisher.js';
import type { Recorder } from './recorder.js';
import { RunRecording } from './run-recording.js';
import { ScanLoop } from './scan-loop.js';
import { StopRecording } from './stop-recording.js';
import { TracePublisher } from './trace-publisher.js';
import type { ServerLink } from './server-link.js';
import { Wire } from './wire.js';

type Configuration = Extract<HostCommand, { type: 'configure' }>;

/** How long `configure` waits for the first attempt of every connection, ms. */
const openBoundMs = 2000;

/** One configured rig: its engine, wire, loop and run, from `configure` to the end. */
export class RigSession {
  readonly engine: ScanEngine;
  /** Live tests of its channels. */
  readonly prober: ChannelProber;
  private readonly wire: Wire;
  private readonly pacer: PeriodPacer;
  private readonly loop: ScanLoop;
  private readonly publisher: Publisher;
  private readonly run: RunRecording;
  private readonly stops: StopRecording;
  private envelope: EnvelopeInForce | null;
  private readonly grids = new Map<string, ValueGrid>();
  private isLoopDead = false;
  private looping: Promise<void> = Promise.resolve();

  /**
   * @param onBug told of a fault of the program itself
   * @throws adapter.unknown, adapter.misconfigured, or what the engine refuses
   */
  constructor(
    private readonly rig: Rig,
    configuration: Configuration,
    adapters: ReadonlyMap<string, Adapter>,
    recorder: Recorder,
    link: ServerLink,
    private readonly onBug: (error: unknown) => void,
  ) {
    const { envelope, trip, isLockedOut, calibrations } = configuration;
    this.envelope = envelope;
    const setting = { rig, envelope, trip, isLockedOut, grids: this.grids, calibrations };
    this.engine = createScanEngine(setting, { createSequencer, preflight });
    const { readings } = this.engine;
    const onOpened = () => this.learnGrids();
    this.wire = new Wire(rig, adapters, readings, onOpened, () => this.publisher.requestStatus(), onBug);
    const isAtRest = () => this.isAtRest();
    this.prober = new ChannelProber({
      rig,
      readings,
      wire: this.wire,
      calibrations: calibrations ?? [],
      isAtRest,
    });
    this.publisher = new Publisher(rig, readings, link, () => this.status());
    const traces = new TracePublisher(rig, readings, link);
    const useRun = (run: Parameters<Publisher['useRun']>[0]) => {
      this.publisher.useRun(run);
      traces.useRun(run?.id ?? null);
    };
    this.run = new RunRecording(recorder, rig, calibrations ?? [], {
      send: (message) => link.send(message),
      onRunBegun: useRun,
      onRunOver: () => useRun(null),
      log: (level, text) => link.log(level, text),
    });
    this.stops = new StopRecording(rig, readings, trip, {
      trip: () => this.engine.status().trip,
      isAtRest: () => this.engine.isAtRest(),
      envelope: () => this.envelope,
      send: (message) => link.send(message),
    });
    this.pacer = new PeriodPacer(rig.periodMs / 1000);
    this.loop = new ScanLoop({
      engine: this.engine,
      wire: this.wire,
      pacer: this.pacer,
      periodS: rig.periodMs / 1000,
      serverSilentS: link.serverSilentS,
      sinks: [this.run, this.publisher, traces, new HeldMoveLog(link), this.stops],
      stopwatch: new InterlockStopwatch(this.engine, (response) =>
        link.send({ type: 'interlock-response', response }),
      ),
    });
  }

  /** Opens the wires and starts to scan; a wire that cannot be opened is tried again and again. */
  async begin(): Promise<void> {
    await this.wire.open(openBoundMs);
    this.looping = this.keepScanning();
  }

  /** Lets go of the wire without moving anything; for a rig that is at rest or cannot be reached. */
  async end(): Promise<void> {
    this.loop.stop();
    await this.looping.catch(() => undefined);
    this.stops.finish();
    this.run.interrupt('The rig host ended before the run did.', this.engine.status().trip);
    await this.run.closed();
    await this.wire.close();
  }

  /** The loop threw twice: nothing more can be done for the rig from here. */
  get hasLoopDied(): boolean {
    return this.isLoopDead;
  }

  get isFree(): boolean {
    return ['offline', 'idle', 'tripped'].includes(this.engine.status().phase) && !this.run.isOpen;
  }

  get areAllConnectionsLost(): boolean {
    return this.wire.areAllDown;
  }

  /** No run is open, its file is closed as well, and every actuator is at rest. */
  isAtRest(): boolean {
    return this.engine.isAtRest() && !this.run.isOpen;
  }

  setEnvelope(envelope: EnvelopeInForce): void {
    this.engine.setEnvelope(envelope);
    this.envelope = envelope;
    this.publisher.requestStatus();
  }

  async startRun(order: RunOrder): Promise<void> {
    await this.run.start(order, this.engine, this.envelope);
    for (const { id, injectedFault } of this.wire.connectionStatus()) {
      if (injectedFault !== null) this.noteFault(id, injectedFault.fault, injectedFault.by);
    }
    this.publisher.requestStatus();
  }

  /** @throws rig.not-a-bench, connection.not-found, channel.not-found */
  setFault(connection: string, fault: WireFault | null, by: string): void {
    this.wire.setFault(connection, fault, by);
    this.noteFault(connection, fault, by);
    this.publisher.requestStatus();
  }

  /** The record of a run says that its wire was made to fail. */
  private noteFault(connection: string, fault: WireFault | null, by: string): void {
    if (fault === null) this.run.note({ type: 'connection.fault-cleared', connection, by });
    else this.run.note({ type: 'connection.fault-injected', connection, fault, by });
  }

  /** After a command: the next scan comes at once and tells the server. */
  touch(): void {
    this.publisher.requestStatus();
    this.pacer.hurry();
  }

  trip(cause: string, message: string): void {
    this.engine.trip(cause, message, Date.now());
    this.touch();
  }

  /** One step on the way to rest, repeated until `isAtRest`: stops what runs, disarms what is armed. */
  headForRest(reason: string): void {
    const { phase } = this.engine.status();
    if (phase === 'running') this.engine.stop('rig host', reason);
    if (phase === 'armed') this.engine.disarm('rig host');
  }

  status(): RigStatus {
    const { statistics } = this.loop;
    return {
      ...this.engine.status(),
      connections: this.wire.connectionStatus(),
      channelFaults: this.wire.channelFaults(),
      scan: {
        count: statistics.count,
        overruns: statistics.overruns,
        latenessP99Ms: statistics.latenessP99Ms(),
        wireMeanMs: statistics.wireMeanMs(),
      },
    };
  }

  /** After a first fault of its own the loop goes on, tripped, so that the stop action still happens. */
  private async keepScanning(): Promise<void> {
    try {
      await this.loop.run();
    } catch (error) {
      this.onBug(error);
      await this.loop.run().catch((again: unknown) => {
        this.isLoopDead = true;
        this.onBug(again);
      });
    }
  }

  /** What an actuator's wire can carry is known from when its connection opens; the engine looks it up then. */
  private learnGrids(): void {
    for (const [channel, grid] of this.wire.grids()) this.grids.set(channel, grid);
  }
}
