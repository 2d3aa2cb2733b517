/** How many attempts are free, and how fast the wait grows after them. */
export interface ThrottleRule {
  freeAttempts: number;
  /** Wait after the first attempt beyond the free ones, s; doubles with each further one. */
  firstWaitS: number;
  maxWaitS: number;
  /** Attempts are forgotten after this long without a new one, s. */
  forgetAfterS: number;
}

interface Attempts {
  count: number;
  lastAtS: number;
}

const maxKeys = 10_000;

/**
 * Slows repeated attempts on one key down by an exponentially growing wait. An attempt counts when it
 * begins, so that many at once gain nothing; success clears the key.
 */
export class AttemptThrottle {
  private readonly attemptsByKey = new Map<string, Attempts>();

  constructor(private readonly rule: ThrottleRule) {}

  /** @returns seconds to wait before the next attempt is taken; 0 where it may go on now */
  waitS(key: string, nowS: number): number {
    const attempts = this.attemptsByKey.get(key);
    if (attempts === undefined || this.isForgotten(attempts, nowS)) return 0;
    const beyond = attempts.count - this.rule.freeAttempts;
    if (beyond < 0) return 0;
    const waitS = Math.min(this.rule.firstWaitS * 2 ** beyond, this.rule.maxWaitS);
    return Math.max(0, attempts.lastAtS + waitS - nowS);
  }

  begin(key: string, nowS: number): void {
    const before = this.attemptsByKey.get(key);
    const count = before === undefined || this.isForgotten(before, nowS) ? 0 : before.count;
    // Deleted first, so that the map's order is the order of the last attempt.
    this.attemptsByKey.delete(key);
    this.attemptsByKey.set(key, { count: count + 1, lastAtS: nowS });
    this.dropOldest();
  }

  succeed(key: string): void {
    this.attemptsByKey.delete(key);
  }

  /** Takes the last attempt back, without clearing those before. */
  undo(key: string): void {
    const attempts = this.attemptsByKey.get(key);
    if (attempts !== undefined) attempts.count -= 1;
  }

  private isForgotten(attempts: Attempts, nowS: number): boolean {
    return nowS - attempts.lastAtS > this.rule.forgetAfterS;
  }

  private dropOldest(): void {
    if (this.attemptsByKey.size <= maxKeys) return;
    const oldest = this.attemptsByKey.keys().next();
    if (oldest.done !== true) this.attemptsByKey.delete(oldest.value);
  }
}
