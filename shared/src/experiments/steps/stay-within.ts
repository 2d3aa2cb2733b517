interface Bucket {
  min: number;
  max: number;
  sum: number;
  count: number;
  durationS: number;
}

const bucketCount = 200;

/**
 * Watches whether a value has stayed within a band (peak to peak) for a time. Memory is bounded: values are
 * kept as extremes of buckets of 1/200 of the time, so it may answer up to one bucket late, never early.
 */
export class StayWithin {
  private readonly ring: Bucket[] = [];
  private first = 0;
  private used = 0;
  private totalS = 0;

  /** @param forS how long the value must stay, s */
  constructor(private readonly forS: number) {
    for (let i = 0; i < bucketCount + 3; i += 1) {
      this.ring.push({ min: Infinity, max: -Infinity, sum: 0, count: 0, durationS: 0 });
    }
  }

  /** Forgets everything, e.g. after a reading that is not good. */
  clear(): void {
    this.used = 0;
    this.totalS = 0;
  }

  /** @param dtS time for which the value stands, s */
  add(value: number, dtS: number): void {
    const last = this.used > 0 ? this.bucket(this.used - 1) : null;
    const bucket = last && last.durationS < this.forS / bucketCount ? last : this.open();
    bucket.min = Math.min(bucket.min, value);
    bucket.max = Math.max(bucket.max, value);
    bucket.sum += value;
    bucket.count += 1;
    bucket.durationS += dtS;
    this.totalS += dtS;
    while (this.used > 1 && this.totalS - this.bucket(0).durationS >= this.forS) this.drop();
  }

  /** @param slackS how much less than the whole time is enough, s */
  hasStayed(band: number, slackS: number): boolean {
    if (this.used === 0 || this.totalS + slackS < this.forS) return false;
    let min = Infinity;
    let max = -Infinity;
    for (let i = 0; i < this.used; i += 1) {
      const bucket = this.bucket(i);
      min = Math.min(min, bucket.min);
      max = Math.max(max, bucket.max);
    }
    return max - min <= band;
  }

  /** Mean over the time watched; NaN while empty. */
  get mean(): number {
    let sum = 0;
    let count = 0;
    for (let i = 0; i < this.used; i += 1) {
      sum += this.bucket(i).sum;
      count += this.bucket(i).count;
    }
    return sum / count;
  }

  private bucket(index: number): Bucket {
    return this.ring[(this.first + index) % this.ring.length] as Bucket;
  }

  private open(): Bucket {
    if (this.used === this.ring.length) this.drop();
    this.used += 1;
    const bucket = this.bucket(this.used - 1);
    bucket.min = Infinity;
    bucket.max = -Infinity;
    bucket.sum = 0;
    bucket.count = 0;
    bucket.durationS = 0;
    return bucket;
  }

  private drop(): void {
    this.totalS -= this.bucket(0).durationS;
    this.first = (this.first + 1) % this.ring.length;
    this.used -= 1;
  }
}
