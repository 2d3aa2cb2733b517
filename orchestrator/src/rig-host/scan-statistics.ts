/** Edges of the lateness histogram grow by this factor from 1 µs: a value is known to 10 %. */
const growth = 1.1;
const bucketCount = 180;
/** Scans per window; figures cover the window before and the present one. */
const windowScans = 512;

/** Figures of the loop over its last scans; nothing is allocated while they are taken. */
export class ScanStatistics {
  private present = new Uint32Array(bucketCount);
  private before = new Uint32Array(bucketCount);
  private presentCount = 0;
  private beforeCount = 0;
  private wireSumS = 0;
  private wireSumBeforeS = 0;
  count = 0;
  overruns = 0;

  /**
   * @realtime
   * @param latenessS how late the scan began
   * @param wireS time it spent waiting for the wire
   */
  add(latenessS: number, wireS: number, periodS: number): void {
    if (this.presentCount === windowScans) this.turn();
    const bucket = bucketOf(latenessS);
    this.present[bucket] = (this.present[bucket] ?? 0) + 1;
    this.presentCount += 1;
    this.wireSumS += wireS;
    this.count += 1;
    if (latenessS > periodS) this.overruns += 1;
  }

  /** @returns the 99th percentile of lateness, upper edge of its bucket, ms */
  latenessP99Ms(): number {
    const total = this.presentCount + this.beforeCount;
    let above = Math.floor(total * 0.01);
    for (let bucket = bucketCount - 1; bucket > 0; bucket -= 1) {
      above -= (this.present[bucket] ?? 0) + (this.before[bucket] ?? 0);
      if (above < 0) return 1e-3 * growth ** bucket;
    }
    return 0;
  }

  /** @returns mean time on the wire per scan, ms */
  wireMeanMs(): number {
    const total = this.presentCount + this.beforeCount;
    return total === 0 ? 0 : (1000 * (this.wireSumS + this.wireSumBeforeS)) / total;
  }

  private turn(): void {
    [this.present, this.before] = [this.before, this.present];
    this.present.fill(0);
    this.beforeCount = this.presentCount;
    this.wireSumBeforeS = this.wireSumS;
    this.presentCount = 0;
    this.wireSumS = 0;
  }
}

/** Bucket 0 is up to 1 µs, the last one everything above 25 s. */
function bucketOf(latenessS: number): number {
  if (latenessS <= 1e-6) return 0;
  return Math.min(bucketCount - 1, Math.ceil(Math.log(latenessS * 1e6) / Math.log(growth)));
}
