import type { Readings } from '../scan/readings.js';

/** A sensor that must be fresh. */
export interface StalenessLimit {
  channel: string;
  /** Oldest age that is still fresh, s. */
  afterS: number;
}

const sameTimeS = 1e-9;

/** Keeps the age of each sensor that must be fresh; a channel never read is stale. */
export class StalenessJudge {
  private readonly indexes: number[];
  private readonly lastGoodS: Float64Array;
  private nowS = NaN;

  constructor(
    private readonly limits: readonly StalenessLimit[],
    readings: Readings,
  ) {
    this.indexes = limits.map((limit) => readings.indexOf(limit.channel));
    this.lastGoodS = new Float64Array(limits.length).fill(NaN);
  }

  /**
   * @param tS monotonic time, s
   * @realtime safe
   */
  judge(readings: Readings, tS: number): void {
    this.nowS = tS;
    for (let i = 0; i < this.indexes.length; i++) {
      if (readings.isGood(this.indexes[i] ?? -1)) this.lastGoodS[i] = tS;
    }
  }

  isStale(channel: string): boolean {
    const index = this.limits.findIndex((limit) => limit.channel === channel);
    return index >= 0 && this.isStaleAt(index);
  }

  /** Calls back for each stale sensor, in the envelope's order. */
  forEachStale(visit: (limit: StalenessLimit) => void): void {
    for (let i = 0; i < this.limits.length; i++) {
      const limit = this.limits[i];
      if (limit && this.isStaleAt(i)) visit(limit);
    }
  }

  private isStaleAt(index: number): boolean {
    const ageS = this.nowS - (this.lastGoodS[index] ?? NaN);
    return !(ageS <= (this.limits[index]?.afterS ?? 0) + sameTimeS);
  }
}
