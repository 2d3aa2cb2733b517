import { closeSync, openSync, writeSync } from 'node:fs';
import type { BenchTruth } from './bench-model.js';

/** Where a write came in: over Modbus or as a text command. */
export type WriteOrigin =
  { readonly unit: number; readonly register: number; readonly value: number } | { readonly command: string };

/** What the bench itself saw. `write` is what it accepted, `refused` what it did not. */
export type BenchLogEntry =
  | ({ event: 'write'; name: string; engineering: number } & WriteOrigin)
  | { event: 'refused'; unit: number; register: number; values: readonly number[] }
  | { event: 'refused'; command: string }
  | { event: 'watchdog'; isTripped: boolean; count: number }
  | { event: 'fault'; fault: string; isOn: boolean }
  | ({ event: 'truth' } & BenchTruth);

export interface BenchLog {
  /** @param benchS bench time, s */
  add(benchS: number, entry: BenchLogEntry): void;
  close(): void;
}

/**
 * Appends one JSON object a line, written at once, so that a killed bench loses nothing.
 *
 * @param file path to append to; null for no log
 */
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
