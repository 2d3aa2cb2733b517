import { Quality } from '../rigs/quality.js';

/** The channels of one scan by index (order of the rig's channel list), reused from scan to scan. */
export class Readings {
  readonly values: Float64Array;
  readonly qualities: Uint8Array;
  private readonly indexById: ReadonlyMap<string, number>;

  constructor(readonly channelIds: readonly string[]) {
    this.values = new Float64Array(channelIds.length).fill(NaN);
    this.qualities = new Uint8Array(channelIds.length).fill(Quality.missing);
    this.indexById = new Map(channelIds.map((id, index) => [id, index]));
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

  /** Sets a reading; a value that is not finite becomes bad, never a number. */
  set(index: number, value: number, quality: Quality): void {
    this.values[index] = value;
    this.qualities[index] = quality === Quality.good && !Number.isFinite(value) ? Quality.bad : quality;
  }
}
