import type { ScanEngine, ScanInput, ScanOutput } from '@cresthold/shared';
import type { InterlockStopwatch } from './interlock-stopwatch.js';
import { monotonicS } from './monotonic-clock.js';
import type { Pacer } from './pacer.js';
import { ScanStatistics } from './scan-statistics.js';
import type { Wire } from './wire.js';

/** Takes what a scan brought, at once: input and output are reused by the next one. */
export interface ScanSink {
  onScan(input: ScanInput, output: ScanOutput): void;
}

export interface ScanLoopParts {
  engine: ScanEngine;
  wire: Wire;
  pacer: Pacer;
  periodS: number;
  /** Time since the server was last heard, s. */
  serverSilentS: (nowS: number) => number;
  sinks: readonly ScanSink[];
  /** Left out where nobody asks how quickly interlocks act. */
  stopwatch?: InterlockStopwatch;
}

/**
 * read → engine (judge, decide, guard) → write → record → publish, once per period. The writes are on
 * their way before anything is recorded, and the scan ends when the device has answered them.
 */
export class ScanLoop {
  readonly statistics = new ScanStatistics();
  private isStopping = false;
  private lastS = 0;
  private readonly input: ScanInput = {
    tS: 0,
    dtS: 0,
    atMs: 0,
    latenessS: 0,
    lostConnections: [],
    serverSilentS: 0,
  };

  constructor(private readonly parts: ScanLoopParts) {}

  /** Runs until `stop`. Rejects where the engine threw, which is a bug. */
  async run(scansMax = Infinity): Promise<void> {
    this.lastS = monotonicS() - this.parts.periodS;
    for (let scan = 0; scan < scansMax && !this.isStopping; scan += 1) {
      const latenessS = await this.parts.pacer.next();
      await this.scanOnce(latenessS);
    }
  }

  stop(): void {
    this.isStopping = true;
    this.parts.pacer.hurry();
  }

  private async scanOnce(latenessS: number): Promise<void> {
    const { engine, wire, sinks, periodS, stopwatch } = this.parts;
    const startS = monotonicS();
    await wire.read();
    const readS = monotonicS();
    const output = engine.scan(this.fillInput(startS, latenessS));
    const writeStartS = monotonicS();
    const written = wire.write(output.writes);
    for (const sink of sinks) sink.onScan(this.input, output);
    stopwatch?.onScan(this.input, output);
    if (written !== null) await written;
    stopwatch?.onWritten(monotonicS());
    this.statistics.add(latenessS, readS - startS + (monotonicS() - writeStartS), periodS);
  }

  private fillInput(nowS: number, latenessS: number): ScanInput {
    const { input, parts } = this;
    input.tS = nowS;
    input.dtS = Math.max(nowS - this.lastS, 1e-6);
    input.atMs = Date.now();
    input.latenessS = latenessS;
    input.lostConnections = parts.wire.takeLost();
    input.serverSilentS = parts.serverSilentS(nowS);
    this.lastS = nowS;
    return input;
  }
}
