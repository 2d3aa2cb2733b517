import { openSync, renameSync, statSync } from 'node:fs';

/** What a rig host prints is kept up to this size, and once more as much before it. */
const outputBytesMax = 1024 * 1024;

/** Opens the file for what a host prints, at its end. @returns a file descriptor that the caller closes */
export function openOutput(outputFile: string): number {
  const size = statSync(outputFile, { throwIfNoEntry: false })?.size ?? 0;
  if (size > outputBytesMax) renameSync(outputFile, `${outputFile}.1`);
  return openSync(outputFile, 'a');
}
