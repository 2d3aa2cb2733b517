import { envelopeContentSchema, type EnvelopeInForce } from '../envelopes/envelope.schema.js';
import type { PreflightFault } from '../experiments/preflight.types.js';
import type { Sequencer, SequencerInput, SequencerOutput } from '../experiments/sequencer.types.js';
import type { RunOrder } from '../live/host-message.schema.js';
import { Quality } from '../rigs/quality.js';
import { rigSchema, type Rig } from '../rigs/rig.schema.js';
import { createScanEngine } from './scan-engine.js';
import type { ScanEngine, ScanEngineConfiguration, ScanInput, ScanOutput } from './scan-engine.types.js';

const display = { min: 0, max: 100, decimals: 1 };
const wired = (connection: string) => ({ connection, address: {} });

/** Two wires, two actuators, one sensor, a heartbeat and a derived channel; 100 ms a scan. */
export const plantRig: Rig = rigSchema.parse({
  id: 'plant',
  title: 'Plant of the tests',
  periodMs: 100,
  connections: [
    { id: 'main', title: 'Main', adapter: 'in-memory', configuration: {} },
    { id: 'aux', title: 'Auxiliary', adapter: 'in-memory', configuration: {} },
  ],
  channels: [
    { kind: 'actuator', id: 'valve', title: 'Valve', unit: '%', display, ...wired('main') },
    { kind: 'actuator', id: 'fan', title: 'Fan', unit: '%', display, ...wired('aux') },
    { kind: 'sensor', id: 'temp', title: 'Temperature', unit: '°C', display, ...wired('main') },
    { kind: 'actuator', id: 'beat', title: 'Heartbeat', unit: '', display, ...wired('main') },
    { kind: 'actuator', id: 'free', title: 'Without limit', unit: '', display, ...wired('main') },
    {
      kind: 'derived',
      id: 'twice',
      title: 'Twice the temperature',
      unit: '',
      display,
      expression: '2 * temp',
    },
  ],
});

const limit = {
  min: 0,
  max: 100,
  slewPerS: 10,
  ditherAmplitudeMax: 5,
  rest: 20,
  stopCategory: 1,
  readBackTolerance: 0.5,
  readBackWithinS: 1,
};

/** The input of `envelopeContentSchema`, for tests to vary. */
export function plantEnvelope(
  change: { valve?: object; fan?: object; content?: object } = {},
): EnvelopeInForce {
  const content = envelopeContentSchema.parse({
    limits: [
      { ...limit, channel: 'valve', ...change.valve },
      { ...limit, channel: 'fan', rest: 0, ...change.fan },
    ],
    interlocks: [
      {
        id: 'too-hot',
        title: 'Too hot',
        condition: 'temp > 90',
        delayS: 0.3,
        action: 'trip',
        message: 'Hot.',
      },
    ],
    staleness: [{ channel: 'temp', afterS: 0.5 }],
    heartbeat: { channel: 'beat', periodS: 0.5 },
    overrunLimit: 3,
    serverSilenceS: 2,
    ...change.content,
  });
  return { id: 'envelope', version: 4, content };
}

/** A sequencer whose every step the test writes itself. */
export function scriptedSequencer(script: (input: SequencerInput, step: number) => Partial<SequencerOutput>) {
  let count = 0;
  const results = new Map<string, number>();
  const seen: number[] = [];
  const sequencer: Sequencer = {
    signalNames: ['seek.estimate'],
    signals: new Float64Array([NaN]),
    results,
    step(input) {
      seen.push(input.tS);
      return { requests: [], events: [], activeSteps: [], end: null, ...script(input, count++) };
    },
  };
  return { sequencer, results, seen };
}

export const plantOrder: RunOrder = {
  runId: 'run-1',
  file: 'run-1.sqlite',
  by: 'test engineer',
  experiment: { id: 'e', title: 'E', version: 1, graph: { steps: [], edges: [] } },
  objective: null,
  manifest: {},
};

export interface PlantOptions extends Partial<ScanEngineConfiguration> {
  sequencer?: Sequencer;
  /** What preflight finds. */
  faults?: PreflightFault[];
}

/** An engine on a plant that takes each write at once, with a clock of its own and faults to choose. */
export class FakePlant {
  readonly engine: ScanEngine;
  /** What the actuators stand at. */
  readonly at: Record<string, number> = { valve: 20, fan: 0, beat: 0, free: 0, temp: 50 };
  readonly periodS = plantRig.periodMs / 1000;
  tS = 1000;
  lost: string[] = [];
  /** Points of its trace channels, where its rig has some. */
  readonly traces: Record<string, ArrayLike<number>> = {};
  /** Channels whose reads fail. */
  bad = new Set<string>();
  /** Actuators that take no write. */
  stuck = new Set<string>();
  latenessS = 0;
  serverSilentS = 0;
  /** Names of the columns of the run that was started last. */
  columns: string[] = [];

  private readonly rig: Rig;

  constructor(options: PlantOptions = {}) {
    const { sequencer, faults = [], ...configuration } = options;
    this.rig = configuration.rig ?? plantRig;
    this.engine = createScanEngine(
      {
        rig: plantRig,
        envelope: plantEnvelope(),
        trip: null,
        isLockedOut: false,
        grids: new Map(),
        ...configuration,
      },
      {
        createSequencer: () => sequencer ?? scriptedSequencer(() => ({})).sequencer,
        preflight: () => faults,
      },
    );
  }

  get phase(): string {
    return this.engine.status().phase;
  }

  /** One scan with copies of all that the engine reuses. */
  scan(change: Partial<ScanInput> = {}): ScanOutput {
    this.tS += change.dtS ?? this.periodS;
    this.read();
    const output = this.engine.scan({
      tS: this.tS,
      dtS: this.periodS,
      atMs: this.tS * 1000,
      latenessS: this.latenessS,
      lostConnections: this.lost.map((connection) => ({
        connection,
        code: 'adapter.disconnected',
        message: `"${connection}" is gone.`,
      })),
      serverSilentS: this.serverSilentS,
      ...change,
    });
    for (const { channel, value } of output.writes) if (!this.stuck.has(channel)) this.at[channel] = value;
    return {
      ...output,
      writes: output.writes.map((write) => ({ ...write })),
      applied: output.applied.slice(),
      events: [...output.events],
      row: output.row?.slice() ?? null,
    };
  }

  scans(count: number): ScanOutput[] {
    return Array.from({ length: count }, () => this.scan());
  }

  /** Scans until the rig is ready, and arms it. */
  arm(): this {
    this.scan();
    this.engine.arm('technician');
    return this;
  }

  run(): this {
    this.arm();
    this.columns = this.engine.startRun(plantOrder).map(({ name }) => name);
    return this;
  }

  /** Everything works again; what was tripped stays so. */
  heal(): void {
    this.lost = [];
    this.bad.clear();
    this.stuck.clear();
    this.latenessS = 0;
    this.serverSilentS = 0;
    this.at.temp = 50;
    this.engine.setLockout(false);
  }

  private read(): void {
    const { readings } = this.engine;
    this.rig.channels.forEach((channel, index) => {
      if (channel.kind === 'derived') return;
      const isLost = this.lost.includes(channel.connection);
      const points = this.traces[channel.id];
      if (points && !isLost && !this.bad.has(channel.id)) return readings.setTrace(index, points);
      const quality = isLost ? Quality.missing : this.bad.has(channel.id) ? Quality.bad : Quality.good;
      readings.set(index, this.at[channel.id] ?? NaN, quality);
    });
  }
}

/** The value written to a channel in a scan, or undefined. */
export function written(output: ScanOutput, channel: string): number | undefined {
  return output.writes.find((write) => write.channel === channel)?.value;
}

export function eventTypes(output: ScanOutput): string[] {
  return output.events.map(({ body }) => body.type);
}
