/** Timers fire up to this much late on a quiet machine: the last stretch is waited for in turns of the loop. */
const timerSlackMs = 0.6;

/**
 * Waits until a moment, to a fraction of a millisecond, without holding up the event loop: timers alone have whole
 * milliseconds, and a request that goes out one millisecond late at 115 200 baud costs a tenth of the line.
 */
export async function waitUntil(momentMs: number, nowMs: () => number): Promise<void> {
  for (;;) {
    const leftMs = momentMs - nowMs();
    if (leftMs <= 0) return;
    const wholeMs = Math.floor(leftMs - timerSlackMs);
    await new Promise<void>((resolve) => {
      if (wholeMs >= 1) setTimeout(resolve, wholeMs);
      else setImmediate(resolve);
    });
  }
}
