import { randomBytes } from 'node:crypto';
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';

const secretBytes = 32;

/**
 * The key that signs sessions: made once per data folder, readable by the server's own user only.
 * Deleting the file signs everybody out.
 */
export function loadSessionSecret(dataFolder: string): string {
  mkdirSync(dataFolder, { recursive: true });
  const file = join(dataFolder, 'session-secret');
  try {
    writeFileSync(file, randomBytes(secretBytes).toString('hex'), { mode: 0o600, flag: 'wx' });
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
  }
  const secret = readFileSync(file, 'utf8').trim();
  if (secret.length < secretBytes * 2) {
    throw new Error(`${file} is damaged: delete it, then everybody signs in again.`);
  }
  return secret;
}
