import {
  createScanEngine,
  createSequencer,
  preflight,
  Quality,
  type EnvelopeContent,
  type Rig,
  type RunOrder,
  type ScanEngine,
  type ScanOutput,
  type WiredChannel,
} from '@cresthold/shared';
import type { BenchDefinition } from './bench-definition.js';
import type { BenchModel } from './bench-model.js';
import type { FaultedModel } from './faulted-model.js';
import type { PlannedFault } from './faults.js';
import { makeFaultedModel } from './make-faulted-model.js';
import { gridOf, virtualWire, type VirtualWire, type VirtualWrite } from './virtual-wire.fixture.js';

/** What a bench in virtual time is run with. */
export interface VirtualBenchSettings<M extends BenchModel> {
  readonly definition: BenchDefinition<M>;
  readonly rig: Rig;
  readonly envelope: EnvelopeContent;
  readonly seed: number;
  /** Bench seconds per second of the rig's documents; that of the definition where left out. */
  readonly speed?: number;
  readonly isNoisy?: boolean;
  readonly isDrifting?: boolean;
  readonly own?: Readonly<Record<string, unknown>>;
  readonly faults?: readonly PlannedFault[];
  /** Name in the model for a channel of a bench with commands; the channel's id where left out. */
  readonly nameOf?: (channel: WiredChannel) => string;
}

/** The real scan engine with guard, interlocks and sequencer on a bench's model, with no wire and no waiting. */
export class VirtualBench<M extends BenchModel = BenchModel> {
  readonly faulted: FaultedModel<M>;
  readonly engine: ScanEngine;
  /** All that the bench was told and took, in order. */
  readonly writes: VirtualWrite[] = [];
  readonly scanS: number;
  private readonly wire: VirtualWire;
  private readonly wired: readonly WiredChannel[];
  private readonly speed: number;
  /** Time of the rig's documents, s. */
  tS = 0;

  constructor(settings: VirtualBenchSettings<M>) {
    const { definition, rig, envelope, seed, isNoisy = true, isDrifting = true } = settings;
    this.speed = settings.speed ?? definition.speed;
    this.scanS = rig.periodMs / 1000;
    const own = settings.own ?? {};
    this.faulted = makeFaultedModel(definition, { seed, isNoisy, isDrifting }, own, settings.faults);
    const told = (name: string, engineering: number) => this.writes.push({ tS: this.tS, name, engineering });
    this.wire = virtualWire(definition, this.faulted, told, settings.nameOf);
    this.wired = rig.channels.filter((channel) => channel.kind !== 'derived');
    const grids = this.wired.flatMap((channel) => {
      const grid = channel.kind === 'actuator' ? gridOf(channel) : null;
      return grid ? [[channel.id, grid] as const] : [];
    });
    this.engine = createScanEngine(
      {
        rig,
        envelope: { id: 'virtual', version: 1, content: envelope },
        trip: null,
        isLockedOut: false,
        grids: new Map(grids),
      },
      { createSequencer, preflight },
    );
  }

  get model(): M {
    return this.faulted.model;
  }

  /** @param dtS time since the scan before, s; a scan that is longer than its period came late */
  scan(dtS = this.scanS): ScanOutput {
    this.tS += dtS;
    this.faulted.advanceTo(this.tS * this.speed);
    const { readings } = this.engine;
    for (const channel of this.wired) {
      const index = readings.indexOf(channel.id);
      if (channel.kind === 'trace') readings.setTrace(index, this.wire.readTrace(channel));
      else readings.set(index, this.wire.read(channel), Quality.good);
    }
    const output = this.engine.scan({
      tS: this.tS,
      dtS,
      atMs: Math.round(this.tS * 1000),
      latenessS: Math.max(0, dtS - this.scanS),
      lostConnections: [],
      serverSilentS: 0,
    });
    for (const { channel, value } of output.writes) this.write(channel, value);
    return output;
  }

  /** Scans for a time, s. */
  scanFor(forS: number): void {
    for (let scans = Math.round(forS / this.scanS); scans > 0; scans -= 1) this.scan();
  }

  /** Arms the rig and starts an experiment. @throws DomainError where that is not allowed */
  start(order: Pick<RunOrder, 'experiment' | 'objective'>): void {
    this.engine.arm('engineer');
    this.engine.startRun({ runId: 'virtual', file: '', by: 'engineer', manifest: {}, ...order });
  }

  /** How many writes lay outside what the envelope allows for their channel; heartbeats have no limit. */
  writesOutside(envelope: EnvelopeContent): number {
    return this.writes.filter(({ name, engineering }) => {
      const limit = envelope.limits.find(({ channel }) => channel === name);
      return limit !== undefined && !(engineering >= limit.min - 1e-9 && engineering <= limit.max + 1e-9);
    }).length;
  }

  private write(id: string, value: number): void {
    const channel = this.wired.find((candidate) => candidate.id === id);
    if (!channel) throw new Error(`"${id}" cannot be written.`);
    this.wire.write(channel, value);
  }
}
