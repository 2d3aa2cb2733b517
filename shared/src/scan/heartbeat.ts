/** Counts up a channel, so that the rig's own watchdog knows that this host lives. */
export class Heartbeat {
  readonly write: { channel: string; value: number };
  private dueS = -Infinity;
  private count = 0;

  /** @param periodS time between two beats, s */
  constructor(
    readonly channel: string,
    readonly connection: string,
    private readonly periodS: number,
  ) {
    this.write = { channel, value: 0 };
  }

  /** Whether `write` is to be sent in this scan; counts 1 to 65 535, then 1 again. */
  beat(tS: number): boolean {
    if (tS < this.dueS - 1e-9) return false;
    /** Keeps the rhythm where a scan came late, and starts anew after a gap. */
    this.dueS = Math.max(this.dueS, tS - this.periodS) + this.periodS;
    if (this.dueS <= tS) this.dueS = tS + this.periodS;
    this.count = (this.count % 65_535) + 1;
    this.write.value = this.count;
    return true;
  }
}
