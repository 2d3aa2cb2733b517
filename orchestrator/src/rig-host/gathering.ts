/**
 * Waits for the requests that one scan began, up to a bound. Reused from scan to scan; an arrival of an
 * earlier scan is not counted.
 */
export class Gathering {
  private waiting = 0;
  private resolve: (() => void) | null = null;
  private timer: NodeJS.Timeout | null = null;
  /** Number of the present wait. */
  round = 0;

  begin(): void {
    this.round += 1;
    this.waiting = 0;
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
  all(boundMs: number): Promise<void> | null {
    if (this.waiting === 0) return null;
    return new Promise((resolve) => {
      this.resolve = resolve;
      this.timer = setTimeout(() => this.finish(), boundMs);
    });
  }

  private finish(): void {
    if (this.timer !== null) clearTimeout(this.timer);
    this.timer = null;
    this.resolve?.();
    this.resolve = null;
  }
}
