import { setImmediate as nextTurn } from 'node:timers/promises';
import { monotonicS } from './monotonic-clock.js';

/** Decides when the next scan begins. */
export interface Pacer {
  /** Resolves when the next scan is due. @returns how late that is, s; never below zero */
  next(): Promise<number>;
  /** Ends the present wait at once: a stop must not wait for a slow period. */
  hurry(): void;
}

/** A timer may fire this much late, so the last stretch is slept in short naps, s. */
const timerMarginS = 0.0015;
/** Length of one nap; input and output get their turn between two, ms. */
const napMs = 0.25;

/**
 * Begins scans at absolute due times, so that lateness does not add up. A scan that is later than whole
 * periods skips them: it is not made up for by a burst.
 */
export class PeriodPacer implements Pacer {
  private dueS: number | null = null;
  private timer: NodeJS.Timeout | null = null;
  private endWait: (() => void) | null = null;
  private isHurried = false;
  private readonly napCell = new Int32Array(new SharedArrayBuffer(4));

  constructor(private readonly periodS: number) {}

  async next(): Promise<number> {
    this.dueS = this.dueS === null ? monotonicS() : this.dueS + this.periodS;
    const dueS = this.dueS;
    await this.waitUntil(dueS);
    const latenessS = monotonicS() - dueS;
    if (latenessS > this.periodS) this.dueS = dueS + Math.floor(latenessS / this.periodS) * this.periodS;
    if (this.isHurried) this.dueS = monotonicS();
    this.isHurried = false;
    return Math.max(0, latenessS);
  }

  hurry(): void {
    this.isHurried = true;
    this.endWait?.();
  }

  private async waitUntil(dueS: number): Promise<void> {
    const sleepS = dueS - timerMarginS - monotonicS();
    if (sleepS > 0.001) await this.sleep(Math.floor(sleepS * 1000));
    else await nextTurn();
    for (let leftS = dueS - monotonicS(); leftS > 0 && !this.isHurried; leftS = dueS - monotonicS()) {
      Atomics.wait(this.napCell, 0, 0, Math.min(napMs, leftS * 1000));
      await nextTurn();
    }
  }

  private sleep(ms: number): Promise<void> {
    if (this.isHurried) return Promise.resolve();
    return new Promise((resolve) => {
      this.endWait = () => {
        if (this.timer !== null) clearTimeout(this.timer);
        this.timer = null;
        this.endWait = null;
        resolve();
      };
      this.timer = setTimeout(this.endWait, ms);
    });
  }
}

/** Begins each scan as soon as the one before has ended: for benchmarks. */
export const freeRunPacer: Pacer = {
  next: () => Promise.resolve(0),
  hurry: () => undefined,
};
