import {
  createScanEngine,
  createSequencer,
  preflight,
  Quality,
  type RunOrder,
  type ScanEngine,
  type ScanOutput,
  type WiredChannel,
} from '@cresthold/shared';
import { burnerRegisterMap } from '../burner/burner-registers.js';
import { BurnerSimulation } from '../burner/burner-simulation.js';
import type { RegisterMap } from '../burner/modbus-face.js';
import { demoScenario } from './demo-scenario.js';

const scanS = 0.05;
const speed = 5;

interface Address {
  unit: number;
  address: number;
  type: 'u16' | 'i16' | 'f32';
  scale: number;
}

/** Rig, envelope and experiment of the demo on the burner in virtual time, through its registers but no wire. */
export class VirtualBurner {
  readonly simulation: BurnerSimulation;
  readonly engine: ScanEngine;
  /** Air trims that the bench was told, %. */
  readonly trims: number[] = [];
  private readonly scenario = demoScenario({ benchHost: '127.0.0.1', benchPort: 1 });
  private readonly registers: RegisterMap;
  private readonly wired: WiredChannel[];
  private tS = 0;

  constructor(seed: number) {
    const { rig, envelope } = this.entry;
    this.simulation = new BurnerSimulation({ seed, isNoisy: true, isDrifting: true });
    this.registers = burnerRegisterMap(this.simulation, (_unit, register, _value, engineering) => {
      if (register === 0) this.trims.push(engineering);
    });
    this.wired = rig.channels.filter((channel) => channel.kind !== 'derived');
    this.engine = createScanEngine(
      {
        rig,
        envelope: { id: 'demo', version: 1, content: envelope.content },
        trip: null,
        isLockedOut: false,
        grids: new Map([['airTrim', { step: 0.01, origin: 0 }]]),
      },
      { createSequencer, preflight },
    );
  }

  get entry() {
    const [entry] = this.scenario.rigs;
    if (!entry) throw new Error('The demo scenario has no rig.');
    return entry;
  }

  order(): RunOrder {
    const [experiment] = this.entry.experiments;
    if (!experiment) throw new Error('The demo scenario has no experiment.');
    const { title, graph } = experiment.content;
    return {
      runId: 'virtual',
      file: '',
      by: 'engineer',
      experiment: { id: experiment.key, title, version: 1, graph },
      objective: this.entry.objectives[0]?.content ?? null,
      manifest: {},
    };
  }

  /** @param dtS time since the scan before, s; a scan that is longer than its period came late */
  scan(dtS = scanS): ScanOutput {
    const tS = (this.tS += dtS);
    this.simulation.advanceTo(tS * speed + 1e-6);
    const { readings } = this.engine;
    for (const channel of this.wired)
      readings.set(readings.indexOf(channel.id), this.read(channel), Quality.good);
    const output = this.engine.scan({
      tS,
      dtS,
      atMs: Math.round(tS * 1000),
      latenessS: Math.max(0, dtS - scanS),
      lostConnections: [],
      serverSilentS: 0,
    });
    for (const { channel, value } of output.writes) this.write(channel, value);
    return output;
  }

  private read(channel: WiredChannel): number {
    const { unit, address, type, scale } = channel.address as unknown as Address;
    const bytes = Buffer.alloc(4);
    this.registers
      .read(unit, address, type === 'f32' ? 2 : 1)
      .forEach((word, index) => bytes.writeUInt16BE(word, 2 * index));
    if (type === 'f32') return bytes.readFloatBE(0) * scale;
    return (type === 'u16' ? bytes.readUInt16BE(0) : bytes.readInt16BE(0)) * scale;
  }

  private write(id: string, value: number): void {
    const channel = this.wired.find((candidate) => candidate.id === id);
    if (!channel) throw new Error(`"${id}" cannot be written.`);
    const { unit, address, scale } = channel.address as unknown as Address;
    this.registers.write(unit, address, [Math.round(value / scale)]);
  }
}
