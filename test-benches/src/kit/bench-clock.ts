/**
 * Bench time: wall time times `speed`. Where the bench itself was held up (a busy or sleeping machine), what
 * is beyond `stallMs` does not count: its watchdog must blame the rig host for a gap, not the bench.
 *
 * @param nowMs monotonic wall time, ms
 * @param speed bench seconds per second
 * @returns bench time since the first call here, s
 */
export function benchClock(nowMs: () => number, speed: number, stallMs: number): () => number {
  let lastMs = nowMs();
  let benchS = 0;
  return () => {
    const atMs = nowMs();
    benchS += (Math.min(atMs - lastMs, stallMs) / 1000) * speed;
    lastMs = atMs;
    return benchS;
  };
}
