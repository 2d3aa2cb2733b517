import { createCipheriv, createDecipheriv, randomBytes } from 'node:crypto';
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';

const keyBytes = 32;
const ivBytes = 12;
const tagBytes = 16;

/**
 * The key that seals secrets in the database: made once per data folder, readable by the server's own user
 * only, so that a copy of the database alone gives no second factor away.
 */
export function loadSealingKey(dataFolder: string): Buffer {
  mkdirSync(dataFolder, { recursive: true });
  const file = join(dataFolder, 'sealing-key');
  try {
    writeFileSync(file, randomBytes(keyBytes).toString('hex'), { mode: 0o600, flag: 'wx' });
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
  }
  const key = Buffer.from(readFileSync(file, 'utf8').trim(), 'hex');
  if (key.length !== keyBytes) {
    throw new Error(`${file} is damaged: put its backup back, or delete it and reset every second factor.`);
  }
  return key;
}

/** Encrypts with AES-256-GCM; `label` binds the text to its owner. */
export function seal(secret: Buffer, key: Buffer, label: string): string {
  const iv = randomBytes(ivBytes);
  const cipher = createCipheriv('aes-256-gcm', key, iv).setAAD(Buffer.from(label));
  const sealed = Buffer.concat([cipher.update(secret), cipher.final()]);
  return Buffer.concat([iv, cipher.getAuthTag(), sealed]).toString('base64');
}

/** @throws Error where key, label or text are not those of the sealing */
export function unseal(text: string, key: Buffer, label: string): Buffer {
  const bytes = Buffer.from(text, 'base64');
  const decipher = createDecipheriv('aes-256-gcm', key, bytes.subarray(0, ivBytes), {
    authTagLength: tagBytes,
  });
  decipher.setAAD(Buffer.from(label)).setAuthTag(bytes.subarray(ivBytes, ivBytes + tagBytes));
  return Buffer.concat([decipher.update(bytes.subarray(ivBytes + tagBytes)), decipher.final()]);
}
