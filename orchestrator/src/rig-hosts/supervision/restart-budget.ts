import type { RestartPolicy } from './supervision-options.js';

/** Grants restarts until the policy's budget is spent; the past is forgotten after its window. */
export class RestartBudget {
  private grantedAtMs: number[] = [];

  constructor(private readonly policy: RestartPolicy) {}

  /**
   * @param nowMs monotonic time
   * @returns how long to wait before the restart, ms; null where the budget is spent
   */
  take(nowMs: number): number | null {
    this.grantedAtMs = this.grantedAtMs.filter((atMs) => nowMs - atMs < this.policy.windowMs);
    if (this.grantedAtMs.length >= this.policy.restartsMax) return null;
    const delayMs = this.policy.firstDelayMs * 2 ** this.grantedAtMs.length;
    this.grantedAtMs.push(nowMs);
    return Math.min(delayMs, this.policy.delayMaxMs);
  }

  /** A person begins again by hand: the past no longer counts. */
  refill(): void {
    this.grantedAtMs = [];
  }
}
