import { airTrimRegister, type BenchLogLine } from '../harness/bench-process.js';

/** Where the burner's damper is safe, as the bench documents it, %. */
export const safeTrim = 70;
/** Without a heartbeat for so long the burner goes to safe by itself, s of bench time. */
export const watchdogS = 2;
/** The damper itself moves no faster, % per s of bench time. */
export const damperRatePctPerS = 8;
const heartbeatRegister = 1;
const tolerancePct = 0.5;

/** When the damper had come to its safe position to stay, ms since 1970; null while it has not. */
export function safeSinceMs(log: readonly BenchLogLine[], eventAtMs: number): number | null {
  const truths = log.flatMap((line) => (line.event === 'truth' && line.atMs > eventAtMs ? [line] : []));
  const lastOutside = truths.findLastIndex((line) => Math.abs(line.trim - safeTrim) > tolerancePct);
  return truths[lastOutside + 1]?.atMs ?? null;
}

/** Bench time at a moment, s: a bench that is itself held up does not count what it missed. */
export function benchTimeS(log: readonly BenchLogLine[], atMs: number): number {
  return log.findLast((line) => line.atMs <= atMs)?.benchS ?? NaN;
}

/** Where the damper was when the event came, %. */
export function trimAt(log: readonly BenchLogLine[], eventAtMs: number): number {
  const truths = log.flatMap((line) => (line.event === 'truth' && line.atMs <= eventAtMs ? [line] : []));
  return truths.at(-1)?.trim ?? NaN;
}

/**
 * How long the rig host went on scanning after the last scan that is in the file, ms: from that scan's own
 * heartbeat to the last heartbeat before the event, both as the bench saw them.
 */
export function missingMs(log: readonly BenchLogLine[], lastScanAtMs: number, eventAtMs: number): number {
  const beats = log.flatMap((line) =>
    line.event === 'write' && line.register === heartbeatRegister && line.atMs <= eventAtMs
      ? [line.atMs]
      : [],
  );
  const own = beats.find((atMs) => atMs >= lastScanAtMs);
  return own === undefined ? 0 : (beats.at(-1) ?? own) - own;
}

/** How many writes to the air trim lay outside these limits. */
export function writesOutside(log: readonly BenchLogLine[], min: number, max: number): number {
  return log.filter(
    (line) =>
      line.event === 'write' &&
      line.register === airTrimRegister &&
      (line.engineering < min || line.engineering > max),
  ).length;
}
