import type { InterlockBypass } from '../live/rig-status.schema.js';
import type { Interlock } from './envelope.schema.js';

/**
 * Where an interlock is: `pending` while its condition has not held for its delay, `acted` once it has, `latched`
 * where it could be clear again but waits for somebody to acknowledge it.
 */
export type InterlockState = 'clear' | 'pending' | 'acted' | 'latched';

/** Two times closer than this are the same, s: sums of periods are not exact. */
const sameTimeS = 1e-9;

/** What one judgement of an interlock brought. */
export type InterlockTurn = 'acted' | 'cleared' | null;

/** One interlock and what is remembered of it from scan to scan. Times are monotonic, s. */
export class JudgedInterlock {
  state: InterlockState = 'clear';
  /** When the condition became true, s; NaN while it is false. */
  sinceS = NaN;
  /** Since when it could be clear again, s; NaN while it could not. */
  private safeSinceS = NaN;
  private bypassedUntilS = -Infinity;
  private bypass: InterlockBypass | null = null;
  private forcedUntilS = -Infinity;

  /**
   * @param isViolated puts the condition into `truth[0]`: only a plain 0 is safe
   * @param mayClear puts into `truth[0]` whether it may clear; null where it may as soon as its condition is false
   */
  constructor(
    readonly interlock: Interlock,
    private readonly isViolated: () => void,
    private readonly mayClear: (() => void) | null,
    private readonly truth: Float64Array,
  ) {}

  /** @realtime safe */
  judge(tS: number): InterlockTurn {
    this.isViolated();
    const isForced = tS < this.forcedUntilS;
    if (isForced || this.truth[0] !== 0) return this.holdViolated(tS);
    return this.holdSafe(tS);
  }

  /** When it comes due, s. */
  get dueS(): number {
    return this.sinceS + this.interlock.delayS;
  }

  isBypassedAt(tS: number): boolean {
    return tS < this.bypassedUntilS;
  }

  /** End of the bypass, s; −∞ where there is none. */
  get bypassEndS(): number {
    return this.bypassedUntilS;
  }

  /** While bypassed it is judged and shown, and does not act; afterwards it acts at once where it still must. */
  bypassUntil(untilS: number, bypass: InterlockBypass | null = null): void {
    this.bypassedUntilS = untilS;
    this.bypass = bypass;
    if (this.state === 'acted' || this.state === 'latched') this.state = 'pending';
  }

  /** Who bypasses it and why; null where nobody does. */
  bypassAt(tS: number): InterlockBypass | null {
    return this.isBypassedAt(tS) ? this.bypass : null;
  }

  endBypass(): void {
    this.bypassedUntilS = -Infinity;
  }

  /** Takes the condition as true, for a proof test. */
  forceUntil(untilS: number): void {
    this.forcedUntilS = untilS;
  }

  isForcedAt(tS: number): boolean {
    return tS < this.forcedUntilS;
  }

  /** @returns whether there was something to acknowledge */
  acknowledge(): boolean {
    if (this.state !== 'latched') return false;
    this.state = 'clear';
    return true;
  }

  private holdViolated(tS: number): InterlockTurn {
    this.safeSinceS = NaN;
    if (this.state === 'acted') return null;
    if (this.state === 'latched') {
      this.state = 'acted';
      return 'acted';
    }
    if (Number.isNaN(this.sinceS)) this.sinceS = tS;
    const isDue = !this.isBypassedAt(tS) && tS - this.sinceS >= this.interlock.delayS - sameTimeS;
    this.state = isDue ? 'acted' : 'pending';
    return isDue ? 'acted' : null;
  }

  private holdSafe(tS: number): InterlockTurn {
    const wasActed = this.state === 'acted';
    if (wasActed && !this.isSafeLongEnough(tS)) return null;
    this.sinceS = NaN;
    this.safeSinceS = NaN;
    if (this.state === 'latched') return null;
    this.state = wasActed && this.interlock.isLatching ? 'latched' : 'clear';
    return wasActed && this.state === 'clear' ? 'cleared' : null;
  }

  /** Hysteresis: what has acted clears only on the far side of `clearCondition`, and after `clearDelayS`. */
  private isSafeLongEnough(tS: number): boolean {
    if (this.mayClear) {
      this.mayClear();
      if (this.truth[0] !== 1) {
        this.safeSinceS = NaN;
        return false;
      }
    }
    if (Number.isNaN(this.safeSinceS)) this.safeSinceS = tS;
    return tS - this.safeSinceS >= this.interlock.clearDelayS - sameTimeS;
  }
}
