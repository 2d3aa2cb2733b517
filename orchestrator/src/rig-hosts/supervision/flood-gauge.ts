/** Counts messages in windows of one second. */
export class FloodGauge {
  private windowBeganMs = 0;
  private count = 0;

  constructor(private readonly perSMax: number) {}

  /** @param nowMs monotonic time of one more message */
  isTooMuch(nowMs: number): boolean {
    if (nowMs - this.windowBeganMs >= 1000) {
      this.windowBeganMs = nowMs;
      this.count = 0;
    }
    this.count += 1;
    return this.count > this.perSMax;
  }
}
