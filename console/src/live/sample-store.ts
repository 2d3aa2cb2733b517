import type { Telemetry } from '@cresthold/shared';
import { FrameBatch, type RequestFrame } from './frame-batch.js';
import { RingBuffer } from './ring-buffer.js';

/** Rows kept per rig: 10 minutes at 50 ms and some to spare. */
const capacity = 16_384;

/** The live samples of one rig. They never enter the query cache. */
export class RigSamples {
  readonly ring = new RingBuffer(capacity);
  /** Browser's clock when the newest batch came, ms; NaN before the first. */
  receivedAtMs = NaN;
  /** Batches that were lost on the way, found by their numbers. */
  lostBatches = 0;
  private lastSequence: number | null = null;
  private readonly batch: FrameBatch;
  readonly subscribe: FrameBatch['subscribe'];

  constructor(requestFrame: RequestFrame) {
    this.batch = new FrameBatch(requestFrame);
    this.subscribe = this.batch.subscribe;
  }

  take(telemetry: Telemetry, nowMs: number): void {
    const first = telemetry.rows[0];
    const expected = this.lastSequence === null ? telemetry.sequence : this.lastSequence + 1;
    if (first && telemetry.sequence !== expected) {
      this.lostBatches += Math.max(0, telemetry.sequence - expected);
      this.breakLine(first.atMs);
    }
    this.lastSequence = telemetry.sequence;
    for (const row of telemetry.rows) this.ring.push(row.atMs, telemetry.columns, row.values);
    this.receivedAtMs = nowMs;
    this.batch.changed();
  }

  /** A row without values, so that charts draw a gap and not a line over what was missed. */
  private breakLine(beforeMs: number): void {
    if (this.ring.length > 0) this.ring.push(beforeMs - 1, [], []);
  }
}

/** The live samples of every rig that a page asked for. */
export class SampleStore {
  private readonly rigs = new Map<string, RigSamples>();

  constructor(private readonly requestFrame: RequestFrame) {}

  of(rigId: string): RigSamples {
    let samples = this.rigs.get(rigId);
    if (!samples) {
      samples = new RigSamples(this.requestFrame);
      this.rigs.set(rigId, samples);
    }
    return samples;
  }
}
