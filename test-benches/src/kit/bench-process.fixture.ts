import { readFileSync } from 'node:fs';
import { setTimeout as wait } from 'node:timers/promises';
import type { BenchLogEntry } from './bench-log.js';

/** One line of a bench's log. */
export type LoggedEntry = BenchLogEntry & { readonly atMs: number; readonly benchS: number };

export function readBenchLog(file: string): LoggedEntry[] {
  const lines = readFileSync(file, 'utf8').trim().split('\n');
  return lines.map((line) => JSON.parse(line) as LoggedEntry);
}

/** Waits until something is so; bounds a busy machine, no measure of speed. @throws Error after 15 s */
export async function until(isTrue: () => Promise<boolean>): Promise<void> {
  for (let tries = 0; tries < 300; tries += 1) {
    if (await isTrue()) return;
    await wait(50);
  }
  throw new Error('What was waited for did not come within fifteen seconds.');
}

/** A host that lives: counts up by a write every twentieth of a second. @returns what makes it fall silent */
export function beatHeart(write: (beat: number) => Promise<unknown>): () => Promise<void> {
  let isLive = true;
  const beats = (async () => {
    for (let beat = 1; isLive; beat = (beat + 1) & 0xffff) {
      await write(beat);
      await wait(50);
    }
  })();
  return async () => {
    isLive = false;
    await beats;
  };
}
