import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { serialize } from 'node:v8';
import { shippedRegistry } from '@cresthold/adapters';
import { createScanEngine, createSequencer, preflight, type ScanEngine } from '@cresthold/shared';
import { z } from 'zod';
import { BareLoop } from './bare-loop.js';
import { freeRunEnvelope, freeRunOrder, freeRunRig } from './free-run-rig.js';
import { monotonicS } from './monotonic-clock.js';
import { freeRunPacer } from './pacer.js';
import { Publisher } from './publisher.js';
import { Recorder } from './recorder.js';
import { RunRecording } from './run-recording.js';
import { ScanLoop } from './scan-loop.js';
import { Wire } from './wire.js';

/**
 * The whole loop without its pace, for benchmarks: real wire, engine and recorder against a bare loop of
 * one read and one write, in alternating rounds. Takes one order by IPC, answers with one outcome, ends.
 */
const orderSchema = z.object({
  host: z.string(),
  port: z.int(),
  /** Scans per round. */
  scans: z.int().positive(),
  rounds: z.int().positive(),
});

const folder = mkdtempSync(join(tmpdir(), 'cresthold-free-run-'));

function fail(error: unknown): void {
  console.error(error);
  process.exitCode = 1;
}

/** The loop of a rig host with all its parts; what would go to the server is serialised and let go. */
class WholeLoop {
  private readonly recorder = new Recorder((message) => fail(message));
  private readonly rig;
  private readonly engine: ScanEngine;
  private readonly wire: Wire;
  private readonly recording: RunRecording;
  private readonly loop: ScanLoop;

  constructor(host: string, port: number) {
    const rig = freeRunRig(host, port);
    const setting = {
      rig,
      envelope: freeRunEnvelope(),
      trip: null,
      isLockedOut: false,
      grids: new Map([['channel0', { step: 1, origin: 0 }]]),
    };
    this.rig = rig;
    this.engine = createScanEngine(setting, { createSequencer, preflight });
    const ignore = () => undefined;
    this.wire = new Wire(rig, shippedRegistry.adapters, this.engine.readings, ignore, ignore, fail);
    const sendDroppable = (message: unknown) => serialize(message).length > 0;
    const publisher = new Publisher(rig, this.engine.readings, { sendDroppable }, () => ({
      ...this.engine.status(),
      connections: [],
      channelFaults: [],
      scan: { count: 0, overruns: 0, latenessP99Ms: 0, wireMeanMs: 0 },
    }));
    this.recording = new RunRecording(this.recorder, rig, [], {
      send: (message) => void serialize(message),
      onRunBegun: (run) => publisher.useRun(run),
      onRunOver: () => fail('The run ended in mid-benchmark.'),
      log: (_level, text) => fail(text),
    });
    this.loop = new ScanLoop({
      engine: this.engine,
      wire: this.wire,
      pacer: freeRunPacer,
      periodS: rig.periodMs / 1000,
      serverSilentS: () => 0,
      sinks: [this.recording, publisher],
    });
  }

  /** Arms the rig and starts a run that goes on for the whole benchmark. */
  async open(): Promise<void> {
    await this.recorder.ready;
    await this.wire.open(5000);
    await this.loop.run(20);
    this.engine.arm('benchmark');
    await this.recording.start(freeRunOrder(join(folder, 'run.sqlite')), this.engine, freeRunEnvelope());
    await this.loop.run(20);
  }

  /** @returns how long it took, s */
  async run(scans: number): Promise<number> {
    const startS = monotonicS();
    await this.loop.run(scans);
    const durationS = monotonicS() - startS;
    const { phase } = this.engine.status();
    if (phase !== 'running') throw new Error(`The rig is ${phase} in mid-benchmark.`);
    return durationS;
  }

  async close(): Promise<void> {
    await this.wire.close();
    await this.recorder.close();
  }
}

const median = (values: readonly number[]): number =>
  [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? NaN;

/** Loops of one kind before the other has its turn: short, so that both see the same machine. */
const blockLoops = 200;

/** One round of both. @returns how long each took, s */
async function alternate(whole: WholeLoop, bare: BareLoop, loops: number) {
  let wholeS = 0;
  let bareS = 0;
  for (let left = loops; left > 0; left -= blockLoops) {
    const block = Math.min(left, blockLoops);
    bareS += await bare.run(block);
    wholeS += await whole.run(block);
  }
  return { wholeS, bareS };
}

async function measure(value: unknown): Promise<void> {
  const { host, port, scans, rounds } = orderSchema.parse(value);
  const whole = new WholeLoop(host, port);
  const bare = new BareLoop();
  await whole.open();
  await bare.open(host, port);
  await alternate(whole, bare, scans); // Warm-up.
  const times: Awaited<ReturnType<typeof alternate>>[] = [];
  for (let round = 0; round < rounds; round += 1) times.push(await alternate(whole, bare, scans));
  await bare.close();
  await whole.close();
  process.send?.({
    scansPerS: median(times.map(({ wholeS }) => scans / wholeS)),
    bareLoopsPerS: median(times.map(({ bareS }) => scans / bareS)),
    ratio: median(times.map(({ wholeS, bareS }) => bareS / wholeS)),
  });
}

process.once('message', (value) => {
  void measure(value)
    .catch(fail)
    .finally(() => {
      rmSync(folder, { recursive: true, force: true });
      process.disconnect();
    });
});
