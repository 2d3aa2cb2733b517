/** How often the bound is looked at, ms: one timer for all scans is cheaper than one for each. */
const tickMs = 25;

/**
 * Waits for the requests that one scan began, up to a bound. Reused from scan to scan; an arrival of an
 * earlier scan is not counted.
 */
export class Gathering {
  private waiting = 0;
  private ticks = 0;
  private resolve: (() => void) | null = null;
  private readonly ticksMax: number;
  private timer: NodeJS.Timeout | undefined;
  private readonly wait = (resolve: () => void): void => {
    this.resolve = resolve;
  };
  /** Number of the present wait. */
  round = 0;

  /** @param boundMs longest wait; kept to within two ticks of 25 ms */
  constructor(boundMs: number) {
    this.ticksMax = Math.ceil(boundMs / tickMs);
  }

  /** Begins to keep the bound; until then a wait has none. */
  start(): void {
    this.timer ??= setInterval(() => this.tick(), tickMs);
  }

  begin(): void {
    this.round += 1;
    this.waiting = 0;
    this.ticks = 0;
  }

  expect(): void {
    this.waiting += 1;
  }

  /** @param round the round in which the request began */
  arrive(round: number): void {
    if (round !== this.round) return;
    this.waiting -= 1;
    if (this.waiting === 0) this.finish();
  }

  /** @returns null where there is nothing to wait for */
  all(): Promise<void> | null {
    return this.waiting === 0 ? null : new Promise(this.wait);
  }

  close(): void {
    clearInterval(this.timer);
    this.finish();
  }

  private tick(): void {
    this.ticks += 1;
    if (this.ticks > this.ticksMax) this.finish();
  }

  private finish(): void {
    this.resolve?.();
    this.resolve = null;
  }
}
