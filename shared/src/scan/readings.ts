import { Quality } from '../rigs/quality.js';
import type { Rig } from '../rigs/rig.schema.js';
import { TraceReading } from './trace-reading.js';

/** The axis of a trace, as far as its points need it. */
interface EvenAxis {
  readonly from: number;
  readonly step: number;
}

/** The channels of one scan by index (order of the rig's channel list), reused from scan to scan. */
export class Readings {
  /** Values by index; NaN for a trace, which is no number. */
  readonly values: Float64Array;
  readonly qualities: Uint8Array;
  /** Traces by index; null for every other channel. */
  readonly traces: readonly (TraceReading | null)[];
  private readonly indexById: ReadonlyMap<string, number>;

  /** @param axes of the channels that are traces, by id */
  constructor(
    readonly channelIds: readonly string[],
    axes: ReadonlyMap<string, EvenAxis> = new Map(),
  ) {
    this.values = new Float64Array(channelIds.length).fill(NaN);
    this.qualities = new Uint8Array(channelIds.length).fill(Quality.missing);
    this.indexById = new Map(channelIds.map((id, index) => [id, index]));
    this.traces = channelIds.map((id) => {
      const axis = axes.get(id);
      return axis ? new TraceReading(axis.from, axis.step) : null;
    });
  }

  /** Readings for every channel of a rig, traces included. */
  static of(rig: Rig): Readings {
    const ids = rig.channels.map(({ id }) => id);
    return new Readings(
      ids,
      new Map(rig.channels.flatMap((c) => (c.kind === 'trace' ? [[c.id, c.axis]] : []))),
    );
  }

  /** Index of a channel, or −1. */
  indexOf(channelId: string): number {
    return this.indexById.get(channelId) ?? -1;
  }

  isGood(index: number): boolean {
    return this.qualities[index] === Quality.good;
  }

  /** The value where it is good, else NaN. */
  goodValue(index: number): number {
    return this.qualities[index] === Quality.good ? (this.values[index] ?? NaN) : NaN;
  }

  /** The trace where it is good, else null. */
  goodTrace(index: number): TraceReading | null {
    return this.qualities[index] === Quality.good ? (this.traces[index] ?? null) : null;
  }

  /** Sets a reading; a value that is not finite becomes bad, never a number. */
  set(index: number, value: number, quality: Quality): void {
    this.values[index] = value;
    this.qualities[index] = quality === Quality.good && !Number.isFinite(value) ? Quality.bad : quality;
  }

  /**
   * Copies the points of a trace; good where all of them are numbers (see {@link TraceReading.take}), else bad.
   * What is not a trace becomes bad.
   */
  setTrace(index: number, points: ArrayLike<number>): void {
    const isTaken = this.traces[index]?.take(points) ?? false;
    this.qualities[index] = isTaken ? Quality.good : Quality.bad;
  }
}
