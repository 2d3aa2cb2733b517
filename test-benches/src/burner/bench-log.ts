import { closeSync, openSync, writeSync } from 'node:fs';

/** What the bench itself saw, one JSON object a line; written at once, so that a killed bench loses nothing. */
export type BenchLogEntry =
  | { event: 'write'; unit: number; register: number; value: number; engineering: number }
  | { event: 'watchdog'; isTripped: boolean; count: number }
  | {
      event: 'truth';
      /** Efficiency without lag and noise, %; null with the flame out. */
      efficiency: number | null;
      bestEfficiency: number;
      bestTrim: number;
      trim: number;
    };

export interface BenchLog {
  /** @param benchS bench time, s */
  add(benchS: number, entry: BenchLogEntry): void;
  close(): void;
}

/** @param file path to append to; null for no log */
export function openBenchLog(file: string | null): BenchLog {
  if (file === null) return { add: () => {}, close: () => {} };
  const handle = openSync(file, 'a');
  return {
    add: (benchS, entry) => {
      writeSync(
        handle,
        `${JSON.stringify({ atMs: Date.now(), benchS: Math.round(benchS * 1000) / 1000, ...entry })}\n`,
      );
    },
    close: () => closeSync(handle),
  };
}
