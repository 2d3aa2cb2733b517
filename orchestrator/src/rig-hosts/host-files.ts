import { mkdirSync } from 'node:fs';
import { join } from 'node:path';

/** Where a rig host's files are in a data folder; the folder is made where it is missing. */
export function hostFiles(dataFolder: string, rigId: string): { pidFile: string; outputFile: string } {
  const folder = join(dataFolder, 'rigs');
  mkdirSync(folder, { recursive: true });
  return { pidFile: join(folder, `${rigId}.pid`), outputFile: join(folder, `${rigId}.log`) };
}
