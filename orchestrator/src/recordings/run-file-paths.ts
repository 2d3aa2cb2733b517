import { mkdirSync } from 'node:fs';
import { join } from 'node:path';

/** Path of a run's file in a data folder; the folder is made where it is missing. */
export function runFilePath(dataFolder: string, runId: string): string {
  const folder = join(dataFolder, 'runs');
  mkdirSync(folder, { recursive: true });
  return join(folder, `${runId}.sqlite`);
}
